package steelyard.harness.tune;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.tune.Results.always;

import org.junit.jupiter.api.Test;

class TuneWordsTest {
    private static final Result RESULT = Results.of(1, new double[] {.01, .03, Double.NaN}, new double[] {1, 2, 2}, 9);

    @Test
    void mark_ofACell_saysWhetherItIsTakenWhateverElseItIs() {
        assertThat(TuneWords.mark(RESULT, Front.Mark.NON_DOMINATED, true)).isEqualTo("non-dominated, taken");
        assertThat(TuneWords.mark(RESULT, Front.Mark.DOMINATED, true)).isEqualTo("taken");
        assertThat(TuneWords.mark(RESULT, Front.Mark.BY_CHANCE, false)).isEqualTo("beaten within chance");
        assertThat(TuneWords.mark(RESULT, Front.Mark.DOMINATED, false)).isEmpty();
    }

    @Test
    void words_ofAnAxis_sayHowManyPlaysHaveNoValue() {
        assertThat(TuneWords.mean(RESULT.want())).isEqualTo("2 %, none in 1 of 3");
        assertThat(TuneWords.mean(RESULT.against())).isEqualTo("1.67");
        assertThat(TuneWords.median(RESULT.against())).isEqualTo("2");
        assertThat(TuneWords.band90(RESULT.against())).isEqualTo("1 to 2");
        Result constant = Results.of(2, always(Double.NaN), always(4), 9);
        assertThat(TuneWords.band95(constant.against())).isEqualTo("always 4");
        assertThat(TuneWords.median(constant.want())).isEqualTo("none");
        assertThat(TuneWords.band90(constant.want())).isEmpty();
    }
}
