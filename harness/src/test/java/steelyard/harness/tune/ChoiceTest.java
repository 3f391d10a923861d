package steelyard.harness.tune;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.tune.Results.always;

import java.util.List;
import org.junit.jupiter.api.Test;

class ChoiceTest {
    private static final Result CHEAP = Results.of(1, always(.00), always(20), 9);
    private static final Result KNEE = Results.of(2, always(.01), always(4), 9);
    private static final Result CALM = Results.of(3, always(.10), always(0), 9);
    private static final Result BEATEN = Results.of(4, always(.02), always(4), 10);

    private static Choice choose(double hold, Result... cells) {
        List<Result> results = List.of(cells);
        return Choice.of(results, Front.marks(results), hold);
    }

    /** Losses: 1 loses (0, 1), 2 (.1, .2), 3 (1, 0); the larger one is least at 2. */
    @Test
    void of_cellsThatAllHold_takesTheOneWithTheSmallestLargerLoss() {
        Choice choice = choose(.9, CHEAP, KNEE, CALM, BEATEN);
        assertThat(choice.taken()).contains(KNEE);
        assertThat(choice.reason())
                .isEqualTo("Of the 3 cells that no other beats among those where all expectations hold "
                        + "together in at least 90 % of plays, its larger loss is the smallest: failed 10 % and standing-changes "
                        + "20 % of the way from the best non-dominated cell of the grid to the worst.");
        assertThat(choice.ranked()).containsExactly(KNEE, CHEAP, CALM, BEATEN);
        assertThat(choice.note()).isEmpty();
    }

    @Test
    void of_cellsOfWhichOneHolds_takesItThoughItIsBeaten() {
        Choice choice = choose(.95, CHEAP, KNEE, CALM, BEATEN);
        assertThat(choice.taken()).contains(BEATEN);
        assertThat(choice.reason())
                .startsWith("Of the cells where all expectations hold")
                .contains("the only one");
    }

    @Test
    void of_cellsOfWhichNoneHolds_takesNoneAndNamesTheNearest() {
        Choice choice = choose(1, CHEAP, KNEE, CALM);
        assertThat(choice.taken()).isEmpty();
        assertThat(choice.reason())
                .isEqualTo("In no cell do all expectations hold together in at least 100 % of plays; nearest is "
                        + "probe.misses 1 with 90 %.");
        assertThat(choice.ranked()).hasSize(3);
    }

    @Test
    void of_twoThatChanceDoesNotTellApart_namesTheOther() {
        Result like = Results.of(5, new double[] {.01, .0, .021}, always(4), 9);
        Choice choice = choose(.9, CHEAP, KNEE, CALM, like);
        assertThat(choice.taken()).contains(KNEE);
        assertThat(choice.note()).isEqualTo("Chance does not tell it from: probe.misses 5.");
    }
}
