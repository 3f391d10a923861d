package steelyard.harness.compare;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;

/** Intervals beside figures worked out by hand; quantiles of the t distribution out of printed tables. */
class DifferenceTest {
    private static final double[] BEFORE = {10, 12, 9, 11, 14};
    private static final double[] AFTER = {12, 15, 10, 11, 17};

    /**
     * Differences 2, 3, 1, 0, 3: mean 1.8, squares about it .04 + 1.44 + .64 + 3.24 + 1.44 = 6.8, variance 1.7, standard
     * error sqrt(1.7 / 5) = .58310; t(.975, 4) = 2.77645; half width 1.61894.
     */
    @Test
    void paired_ofATableByHand_hasItsInterval() {
        Difference difference = Difference.paired(BEFORE, AFTER, 0.05);
        assertThat(difference.size()).isCloseTo(1.8, within(1e-12));
        assertThat(difference.low()).isCloseTo(0.18106, within(1e-4));
        assertThat(difference.high()).isCloseTo(3.41894, within(1e-4));
        assertThat(difference.beyondChance()).isTrue();
    }

    /**
     * Means 11.2 and 13; variances 3.7 and 8.5; error squared (3.7 + 8.5) / 5 = 2.44, error 1.56205; Welch's freedom 2.44^2 /
     * ((.74^2 + 1.7^2) / 4) = 5.9536 / .8594 = 6.92763; t(.975, 6.92763) lies between 2.36462 (7) and 2.44691 (6).
     */
    @Test
    void welch_ofTheSameTable_isWiderAndHoldsZero() {
        Difference difference = Difference.welch(BEFORE, AFTER, 0.05);
        assertThat(difference.size()).isCloseTo(1.8, within(1e-12));
        assertThat(difference.high() - difference.size()).isBetween(2.36462 * 1.56204, 2.38 * 1.56206);
        assertThat(difference.size() - difference.low()).isCloseTo(difference.high() - difference.size(), within(1e-9));
        assertThat(difference.beyondChance()).isFalse();
    }

    /**
     * Newcombe, "Interval estimation for the difference between independent proportions", Statistics in Medicine 17 (1998),
     * table II, method 10: 56 of 70 and 48 of 80 give .2000 with .0524 to .3339 (from memory, and worked out again: Wilson
     * .6916 to .8770 and .4904 to .7001).
     */
    @Test
    void shares_ofAPublishedExample_haveItsInterval() {
        Difference difference = Difference.shares(48, 80, 56, 70, 0.05);
        assertThat(difference.size()).isCloseTo(0.2, within(1e-12));
        assertThat(difference.low()).isCloseTo(0.0524, within(1e-4));
        assertThat(difference.high()).isCloseTo(0.3339, within(1e-4));
    }

    @Test
    void paired_withoutAnyScatter_isThePointItself() {
        assertThat(Difference.paired(new double[] {1, 2}, new double[] {1, 2}, 0.05)
                        .beyondChance())
                .isFalse();
        Difference one = Difference.paired(new double[] {1, 2}, new double[] {2, 3}, 0.05);
        assertThat(one.low()).isEqualTo(1);
        assertThat(one.beyondChance()).isTrue();
        assertThat(Difference.welch(new double[] {1, 1}, new double[] {1, 1}, 0.05)
                        .beyondChance())
                .isFalse();
    }

    @Test
    void paired_atASmallerErrorRate_isWider() {
        Difference usual = Difference.paired(BEFORE, AFTER, 0.05);
        Difference careful = Difference.paired(BEFORE, AFTER, 0.01);
        assertThat(careful.low()).isLessThan(usual.low());
        assertThat(careful.beyondChance()).isFalse();
    }

    @Test
    void paired_ofTablesThatDoNotMatch_isRefused() {
        assertThatThrownBy(() -> Difference.paired(BEFORE, new double[] {1}, 0.05))
                .isInstanceOf(IllegalArgumentException.class);
    }
}
