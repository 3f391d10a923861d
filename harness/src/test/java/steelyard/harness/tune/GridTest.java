package steelyard.harness.tune;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.drills.read.DrillLibrary;

class GridTest {
    private static final String TEXT = DrillLibrary.text("lose-one-of-three").orElseThrow();

    private static Grid grid(String... variations) throws TuneRefused {
        List<Variation> read = new ArrayList<>();
        for (String each : variations) {
            read.add(Variation.read(each));
        }
        return Grid.of("play.yaml", TEXT, read);
    }

    @Test
    void of_twoSettings_hasEveryCombinationOnceAndReadsIt() throws TuneRefused {
        Grid grid = grid("probe.every=500ms, 1s", "probe.misses=2,3,5");
        assertThat(grid.cells())
                .extracting(Cell::words)
                .containsExactly(
                        "probe.every 500ms, probe.misses 2",
                        "probe.every 500ms, probe.misses 3",
                        "probe.every 500ms, probe.misses 5",
                        "probe.every 1s, probe.misses 2",
                        "probe.every 1s, probe.misses 3",
                        "probe.every 1s, probe.misses 5");
        assertThat(grid.cells()).extracting(Cell::number).containsExactly(1, 2, 3, 4, 5, 6);
        assertThat(grid.cells().get(2).drill().stage().pools().get(0).probe())
                .satisfies(probe -> assertThat(probe.everyNanos()).isEqualTo(500_000_000L))
                .satisfies(probe -> assertThat(probe.misses()).isEqualTo(5));
    }

    @Test
    void of_valuesWithCommasInBraces_keepsThemWhole() throws TuneRefused {
        assertThat(grid("retry={at-most: 1, budget: 10%},{at-most: 2, budget: 20%}")
                        .cells())
                .extracting(cell -> cell.drill().stage().pools().get(0).retry().atMost())
                .containsExactly(1, 2);
    }

    @Test
    void of_valueThatTheReaderRefuses_namesTheCellAndThePlace() {
        assertThatThrownBy(() -> grid("probe.misses=3,0", "probe.every=1s"))
                .isInstanceOf(TuneRefused.class)
                .hasMessageStartingWith("with probe.misses 0, probe.every 1s: play.yaml:13:64: ");
    }

    @ParameterizedTest
    @ValueSource(strings = {"probe.every", "=1s", "probe.every=", "probe.every=1s,,2s", "probe.every=1s,1s"})
    void read_ofWhatIsNoVariation_isRefused(String text) {
        assertThatThrownBy(() -> Variation.read(text))
                .isInstanceOf(TuneRefused.class)
                .hasMessageStartingWith("--vary '");
    }

    @Test
    void of_onePathTwice_isRefused() {
        assertThatThrownBy(() -> grid("probe.misses=1", "probe.misses=2"))
                .isInstanceOf(TuneRefused.class)
                .hasMessage("--vary names 'probe.misses' twice; give all its values at once");
    }

    @Test
    void of_tooManyCells_isRefusedBeforeAnyIsMade() throws TuneRefused {
        StringBuilder many = new StringBuilder("=1");
        for (int value = 2; value <= 101; value++) {
            many.append(',').append(value);
        }
        assertThatThrownBy(() -> grid("probe.misses" + many, "probe.passes" + many))
                .isInstanceOf(TuneRefused.class)
                .hasMessage("the grid has more than 10000 cells; vary less at a time");
    }
}
