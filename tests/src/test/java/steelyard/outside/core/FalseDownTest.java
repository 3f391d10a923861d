package steelyard.outside.core;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.SplittableRandom;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.TestFactory;
import steelyard.balancer.settings.PoolSettings.Method;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.outside.CheckTable;

/**
 * How often a healthy backend is taken for down when probes miss by chance: mean number of probes to the first k misses
 * in a row (Feller vol. 1, XIII.7, from memory; table false_down.csv). 1600 runs a row, so that the standard error is 2.5 %
 * of the mean; tolerance 10 %, as the table's recipe says. Rows that would take too long are left out by that recipe.
 */
class FalseDownTest {
    private static final int RUNS = 1600;
    private static final double LONGEST_MEAN = 5_000;

    @TestFactory
    List<DynamicTest> down_byChance_comesAsOftenAsTheTableSays() {
        Set<String> seen = new HashSet<>();
        return CheckTable.rows(FalseDownTest.class, "false_down.csv").stream()
                .filter(row -> CheckTable.number(row, "mean_probes") <= LONGEST_MEAN)
                .filter(row -> seen.add(name(row)))
                .map(row -> DynamicTest.dynamicTest(name(row), () -> assertRow(row)))
                .toList();
    }

    private static String name(Map<String, String> row) {
        return "k=%s p=%s".formatted(row.get("misses_k"), row.get("miss_probability_p"));
    }

    private static void assertRow(Map<String, String> row) {
        int misses = (int) CheckTable.number(row, "misses_k");
        double chance = CheckTable.number(row, "miss_probability_p");
        SplittableRandom random = new SplittableRandom(1968);
        long probes = 0;
        for (int run = 0; run < RUNS; run++) {
            probes += probesToDown(misses, chance, random);
        }
        double mean = CheckTable.number(row, "mean_probes");
        assertThat((double) probes / RUNS).isCloseTo(mean, within(0.1 * mean));
    }

    private static long probesToDown(int misses, double chance, SplittableRandom random) {
        ProbeSettings probe = new ProbeSettings("/afloat", CoreBench.SECOND, CoreBench.SECOND / 2, misses, 2);
        CoreBench bench = new CoreBench(Method.ROUND_ROBIN, new int[] {1}, probe, (draw, a, b) -> Long.MIN_VALUE, 0);
        long probes = 0;
        while (bench.transitions.isEmpty()) {
            long now = bench.decider.nextDeadlineNanos();
            bench.decider.poll(now);
            bench.decider.probeAnswered(0, bench.probesToAnswer.remove(), random.nextDouble() >= chance, now);
            probes++;
        }
        return probes;
    }
}
