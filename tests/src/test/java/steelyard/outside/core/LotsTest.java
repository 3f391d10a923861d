package steelyard.outside.core;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import org.apache.commons.math3.stat.inference.ChiSquareTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Stream;
import steelyard.balancer.core.pick.Lots;
import steelyard.balancer.core.pick.Picker;
import steelyard.balancer.core.pick.Random;
import steelyard.balancer.core.pick.WeightedRandom;

/**
 * Picks by lot against the shares that weights promise, by Pearson's test as Apache Commons Math computes it. The seed is
 * fixed and was chosen beforehand; a p value below 1e-4 would be a finding.
 */
class LotsTest {
    private static final double LEAST_P = 1e-4;
    private static final int PICKS = 200_000;
    private static final Chance CHANCE = new Chance(1_977);
    private static final Lots LOTS =
            (request, attempt, draw) -> CHANCE.bits(Stream.PICK, request, 64L * attempt + draw);

    /** At rest lots come from the alias table; with a weight that moves before each pick, from the tree of sums. */
    @ParameterizedTest
    @ValueSource(booleans = {true, false})
    void weightedRandom_hundredMembers_followsWeights(boolean atRest) {
        int members = 100;
        Picker picker = new WeightedRandom(members, LOTS);
        long[] weights = new long[members];
        for (int member = 0; member < members; member++) {
            weights[member] = (1 + member * 7 % 13) * 1_000L;
            picker.weigh(member, weights[member]);
            picker.enter(member);
        }
        long[] picked = new long[members];
        for (int request = 0; request < PICKS; request++) {
            if (!atRest) {
                picker.weigh(request % members, 1);
                picker.weigh(request % members, weights[request % members]);
            }
            picked[picker.pick(request, 1, 0, new int[0], 0, 0)]++;
        }
        assertThat(p(weights, picked)).isGreaterThan(LEAST_P);
    }

    @Test
    void weightedRandom_someTried_followsTheOthersWeights() {
        Picker picker = new WeightedRandom(5, LOTS);
        long[] weights = {5_000, 1_000, 2_000, 9_000, 3_000};
        for (int member = 0; member < 5; member++) {
            picker.weigh(member, weights[member]);
            picker.enter(member);
        }
        long[] picked = new long[5];
        for (int request = 0; request < PICKS; request++) {
            picked[picker.pick(request, 3, 0, new int[] {3, 0}, 2, 0)]++;
        }
        assertThat(picked[0] + picked[3]).isZero();
        assertThat(p(new long[] {1_000, 2_000, 3_000}, new long[] {picked[1], picked[2], picked[4]}))
                .isGreaterThan(LEAST_P);
    }

    @Test
    void random_anyMembers_isUniformAndIndependentOfTheLastPick() {
        int members = 7;
        Picker picker = new Random(members, LOTS);
        for (int member = 0; member < members; member++) {
            picker.enter(member);
        }
        long[] picked = new long[members * members];
        int last = 0;
        for (int request = 0; request < PICKS; request++) {
            int member = picker.pick(request, 1, 0, new int[0], 0, 0);
            picked[last * members + member]++;
            last = member;
        }
        long[] even = new long[members * members];
        Arrays.fill(even, 1);
        assertThat(p(even, picked)).isGreaterThan(LEAST_P);
    }

    private static double p(long[] weights, long[] picked) {
        double sum = Arrays.stream(weights).sum();
        double all = Arrays.stream(picked).sum();
        double[] expected =
                Arrays.stream(weights).mapToDouble(w -> all * w / sum).toArray();
        return new ChiSquareTest().chiSquareTest(expected, picked);
    }
}
