package steelyard.outside.core;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.SplittableRandom;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestFactory;
import steelyard.balancer.settings.PoolSettings.Method;
import steelyard.outside.CheckTable;

/** Service orders against the tables, by equality; sources in the resources' README. */
class OrdersTest {
    private static final int CYCLES = 4;

    /** Katevenis et al. 1991; Tabatabaee et al. 2021: the interleaved order, cycle after cycle. */
    @TestFactory
    List<DynamicTest> weightedRoundRobin_everyRow_isTheInterleavedOrder() {
        return CheckTable.rows(OrdersTest.class, "iwrr.csv").stream()
                .map(row -> sameOrder(Method.WEIGHTED_ROUND_ROBIN, row))
                .toList();
    }

    /** Waldspurger 1995, figure 3-12, and exact fractions: the first pass is one stride, ties in list order. */
    @TestFactory
    List<DynamicTest> stride_everyRow_isTheStrideOrder() {
        return CheckTable.rows(OrdersTest.class, "stride.csv").stream()
                .filter(row -> row.get("initial_pass").equals("first pass = stride"))
                .map(row -> sameOrder(Method.STRIDE, row))
                .toList();
    }

    private static DynamicTest sameOrder(Method method, Map<String, String> row) {
        String weights = row.get("weights_in_list_order");
        String cycle = row.get("order_one_cycle");
        return DynamicTest.dynamicTest(
                weights,
                () -> assertThat(bench(method, parse(weights)).order(CYCLES * cycle.length()))
                        .isEqualTo(cycle.repeat(CYCLES)));
    }

    /** Waldspurger 1995, sec. 3.3.1: between any two clients the error is never more than one, at every prefix. */
    @Test
    void stride_randomWeights_keepsEveryPairWithinOne() {
        SplittableRandom random = new SplittableRandom(1995);
        for (int set = 0; set < 1000; set++) {
            int[] weights = random.ints(2 + random.nextInt(5), 1, 40).toArray();
            int[] served = new int[weights.length];
            for (char who : bench(Method.STRIDE, weights).order(200).toCharArray()) {
                served[who - 'A']++;
                assertPairsWithinOne(weights, served);
            }
        }
    }

    private static void assertPairsWithinOne(int[] weights, int[] served) {
        for (int a = 0; a < weights.length; a++) {
            for (int b = 0; b < a; b++) {
                double entitled = (double) (served[a] + served[b]) * weights[a] / (weights[a] + weights[b]);
                assertThat(Math.abs(served[a] - entitled))
                        .as("weights %s, served %s", Arrays.toString(weights), Arrays.toString(served))
                        .isLessThanOrEqualTo(1 + 1e-9);
            }
        }
    }

    private static CoreBench bench(Method method, int[] weights) {
        return new CoreBench(method, weights, null, (draw, a, b) -> 0, 0);
    }

    private static int[] parse(String weights) {
        return Arrays.stream(weights.split(":")).mapToInt(Integer::parseInt).toArray();
    }
}
