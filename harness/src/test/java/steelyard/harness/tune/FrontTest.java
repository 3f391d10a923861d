package steelyard.harness.tune;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.tune.Front.Mark.BY_CHANCE;
import static steelyard.harness.tune.Front.Mark.DOMINATED;
import static steelyard.harness.tune.Front.Mark.NON_DOMINATED;
import static steelyard.harness.tune.Results.always;

import java.util.List;
import org.junit.jupiter.api.Test;

class FrontTest {
    /** (failed, changes): 1 (.01, 5), 2 (.02, 2), 3 (.03, 2) beaten by 2, 4 (.04, 1), 5 (.05, 6) beaten by all, 6 like 2. */
    @Test
    void marks_ofCellsMadeByHand_findThoseThatNoOtherBeats() {
        List<Result> cells = List.of(
                Results.of(1, always(.01), always(5), 10),
                Results.of(2, always(.02), always(2), 10),
                Results.of(3, always(.03), always(2), 10),
                Results.of(4, always(.04), always(1), 10),
                Results.of(5, always(.05), always(6), 10),
                Results.of(6, always(.02), always(2), 10));
        assertThat(Front.marks(cells))
                .containsExactly(NON_DOMINATED, NON_DOMINATED, DOMINATED, NON_DOMINATED, DOMINATED, NON_DOMINATED);
    }

    /** Differences .01, -.02, .02: mean .0033, standard error .012, so zero lies well inside; .02, .02, .021 tell. */
    @Test
    void marks_ofCellsThatDifferByLessThanChance_saySo() {
        Result best = Results.of(1, new double[] {.01, .05, .03}, always(2), 10);
        Result near = Results.of(2, new double[] {.02, .03, .05}, always(2), 10);
        Result far = Results.of(3, new double[] {.03, .07, .051}, always(2), 10);
        assertThat(Front.marks(List.of(best, near, far))).containsExactly(NON_DOMINATED, BY_CHANCE, DOMINATED);
        assertThat(Front.alike(best, near)).isTrue();
        assertThat(Front.alike(best, far)).isFalse();
    }

    @Test
    void compare_playsWithoutAValue_areWorseThanAnyWithOne() {
        Result always = Results.of(1, always(.9), always(2), 10);
        Result once = Results.of(2, new double[] {.1, .1, Double.NaN}, always(2), 10);
        Result never = Results.of(3, always(Double.NaN), always(2), 10);
        assertThat(Front.beats(always, once)).isTrue();
        assertThat(Front.beats(once, never)).isTrue();
        assertThat(Front.beats(never, never)).isFalse();
    }

    @Test
    void compare_whereTheMiddleIsBest_countsTheDistanceFromIt() {
        assertThat(Results.around2(2.5).compareTo(Results.around2(1.0))).isNegative();
        assertThat(Results.around2(1.5).compareTo(Results.around2(2.5))).isZero();
        // The mean distance counts, not the distance of the mean: 1 and 3 are both far off.
        assertThat(Results.around2(1, 3).compareTo(Results.around2(2.5, 2.5))).isPositive();
    }
}
