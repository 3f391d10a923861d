package steelyard.harness.tune;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.List;
import org.assertj.core.data.Offset;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Measure;
import steelyard.harness.compare.Direction;
import steelyard.harness.forecast.Figure;

class AimTest {
    private static final double INFINITE = Double.POSITIVE_INFINITY;
    private static final List<Figure> FIGURES = List.of(
            new Figure(Measure.FAILED, null, "failed, from 14.9 s to 20 s", new Bound(-INFINITE, 0.003)),
            new Figure(Measure.SHARE, "fulmar", "share of fulmar, from 38 s to 41 s", new Bound(.18, .3)),
            new Figure(Measure.LATENCY, null, "latency 99 %, from 25 s to 35 s", new Bound(-INFINITE, 1e8)),
            new Figure(Measure.FAILED, null, "failed, whole play", null),
            new Figure(Measure.LATENCY, null, "latency 50 %, whole play", null),
            new Figure(Measure.SHARE, "gannet", "share of gannet, whole play", null),
            new Figure(Measure.FAIRNESS, "pool seats", "fairness of pool seats, whole play", null));

    @ParameterizedTest
    @CsvSource({
        "failed, 0",
        "'failed, whole play', 3",
        "share of fulmar, 1",
        "share, 1",
        "latency 99%, 2",
        "latency 99 %, 2",
        "latency 50%, 4",
        "latency, 2",
        "fail, -1",
        "share of gull, -1"
    })
    void in_ofFigures_isTheFirstWhoseWordsBeginWithTheName(String name, int figure) {
        assertThat(new Aim(name).in(FIGURES)).isEqualTo(figure);
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', textBlock = """
            faild           | --want 'faild' is no measure of this drill; did you mean 'failed'?
            share of gull   | write it like 'share of fulmar'
            beauty          | it has failed, fairness, latency, share
            share of gannet | has no better side by itself; give the drill an expectation on it
            """)
    void check_ofAnotherName_saysWhatThereIs(String name, String message) {
        assertThatThrownBy(() -> new Aim(name).check("--want", FIGURES))
                .isInstanceOf(TuneRefused.class)
                .hasMessageContaining(message);
    }

    @Test
    void direction_followsTheBoundAndElseTheMeasure() {
        assertThat(FIGURES)
                .extracting(each -> Aim.direction(each).side())
                .containsExactly(
                        Direction.Side.LESS,
                        Direction.Side.MIDDLE,
                        Direction.Side.LESS,
                        Direction.Side.LESS,
                        Direction.Side.LESS,
                        Direction.Side.NONE,
                        Direction.Side.MORE);
        assertThat(Direction.of(Measure.FAILED, 0.5, INFINITE).side()).isEqualTo(Direction.Side.MORE);
        assertThat(Direction.of(Measure.SHARE, .2, .4).cost(.25)).isCloseTo(.05, Offset.offset(1e-12));
    }
}
