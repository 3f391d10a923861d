package steelyard.outside.core;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Map;
import java.util.stream.LongStream;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.TestFactory;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.settings.PoolSettings.Method;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.outside.CheckTable;

/**
 * Time from a failure to "down" in the core, over the whole grid of probe phases: mean, least and most as derived (table
 * detection.csv; healthy and refused probes take no time). The rule here is start to start.
 */
class DetectionTest {
    private static final int PHASES = 200;

    @TestFactory
    List<DynamicTest> down_overTheGridOfPhases_takesTheDerivedTime() {
        return CheckTable.rows(DetectionTest.class, "detection.csv").stream()
                .filter(row -> row.get("next_probe_rule").equals("start-to-start"))
                .map(row -> DynamicTest.dynamicTest(
                        "%s T=%s W=%s k=%s"
                                .formatted(
                                        row.get("failure_kind"),
                                        row.get("period_T_s"),
                                        row.get("timeout_W_s"),
                                        row.get("misses_k")),
                        () -> assertRow(row)))
                .toList();
    }

    private static void assertRow(Map<String, String> row) {
        long every = nanos(row, "period_T_s");
        ProbeSettings probe = new ProbeSettings(
                "/afloat", every, nanos(row, "timeout_W_s"), (int) CheckTable.number(row, "misses_k"), 2);
        boolean silent = row.get("failure_kind").equals("black hole");
        long[] took = LongStream.range(0, PHASES)
                .map(phase -> detect(probe, silent, (2 * phase + 1) * every / (2 * PHASES)))
                .toArray();
        double halfStep = every / (2.0 * PHASES);

        assertThat(LongStream.of(took).average().orElseThrow()).isCloseTo(nanos(row, "mean_s"), within(1.0));
        assertThat((double) LongStream.of(took).min().orElseThrow())
                .isCloseTo(nanos(row, "min_s") + halfStep, within(1.0));
        assertThat((double) LongStream.of(took).max().orElseThrow())
                .isCloseTo(nanos(row, "max_s") - halfStep, within(1.0));
    }

    /** Probes start at 0, T, 2T ...; the backend fails {@code intoPeriod} after the fourth. */
    private static long detect(ProbeSettings probe, boolean silent, long intoPeriod) {
        long origin = Long.MAX_VALUE - 5 * probe.everyNanos();
        CoreBench bench = new CoreBench(Method.ROUND_ROBIN, new int[] {1}, probe, (draw, a, b) -> 0, origin);
        long failsAt = origin + 3 * probe.everyNanos() + intoPeriod;
        for (int step = 0; step < 1000 && bench.transitions.isEmpty(); step++) {
            long now = bench.decider.nextDeadlineNanos();
            bench.decider.poll(now);
            boolean healthy = now - failsAt < 0;
            if (!bench.probesToAnswer.isEmpty() && (healthy || !silent)) {
                bench.decider.probeAnswered(0, bench.probesToAnswer.remove(), healthy, now);
            }
        }
        assertThat(bench.transitions.get(0).to()).isEqualTo(Standing.DOWN);
        return bench.transitions.get(0).atNanos() - failsAt;
    }

    private static long nanos(Map<String, String> row, String column) {
        return Math.round(CheckTable.number(row, column) * CoreBench.SECOND);
    }
}
