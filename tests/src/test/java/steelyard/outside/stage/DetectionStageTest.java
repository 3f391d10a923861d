package steelyard.outside.stage;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.stream.LongStream;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.TestFactory;
import steelyard.drills.model.Drill;
import steelyard.harness.record.PlayListener;
import steelyard.outside.CheckTable;

/**
 * {@code detected-in} of played drills, over the grid of instants between two probes at which the backend can fail: mean,
 * least and most as derived (detection.csv, rule start to start; healthy and refused probes take no time). Where in its
 * period a backend is probed is drawn, so a play without trouble shows it first.
 */
class DetectionStageTest {
    private static final long SEED = 3;
    private static final int PHASES = 20;

    @TestFactory
    List<DynamicTest> detectedIn_overTheGridOfPhases_takesTheDerivedTime() {
        return CheckTable.rows(DetectionStageTest.class, "/steelyard/outside/core/detection.csv").stream()
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
        long probed = secondProbe(row);
        long[] took = LongStream.range(0, PHASES)
                .map(phase -> detectedIn(row, probed + (2 * phase + 1) * every / (2 * PHASES)))
                .toArray();
        double halfStep = every / (2.0 * PHASES);

        assertThat(LongStream.of(took).average().orElseThrow()).isCloseTo(nanos(row, "mean_s"), within(1.0));
        assertThat((double) LongStream.of(took).min().orElseThrow())
                .isCloseTo(nanos(row, "min_s") + halfStep, within(1.0));
        assertThat((double) LongStream.of(took).max().orElseThrow())
                .isCloseTo(nanos(row, "max_s") - halfStep, within(1.0));
    }

    private static long secondProbe(Map<String, String> row) {
        List<Long> at = new ArrayList<>();
        WholeStage.play(drill(row, "heal", nanos(row, "period_T_s")), SEED, new PlayListener() {
            @Override
            public void probed(long atNanos, int backend, long probe, boolean passed) {
                at.add(atNanos);
            }
        });
        return at.get(1);
    }

    private static long detectedIn(Map<String, String> row, long failsAtNanos) {
        String fault = row.get("failure_kind").equals("refused") ? "kill" : "hang";
        return Math.round(WholeStage.measure(drill(row, fault, failsAtNanos), SEED)[0]);
    }

    private static Drill drill(Map<String, String> row, String cue, long atNanos) {
        long lastsNanos = atNanos + nanos(row, "max_s") + 2 * nanos(row, "period_T_s");
        return WholeStage.read("""
                drill: Found out
                about: One of two fails at a set instant between two probes.
                stage:
                  pools:
                    seats:
                      method: round-robin
                      probe: {path: /afloat, every: %s, within: %s, misses: %s}
                      serves: {workers: 1, time: 1ms}
                      backends: {fulmar: , gannet: }
                traffic: [{to: seats, rate: 1/s}]
                lasts: %s
                cues: [{at: %s, %s: fulmar, as: fulmar fails}]
                expect: [{measure: detected-in, after: fulmar fails, at-most: 1h}]
                """.formatted(
                        WholeStage.seconds(nanos(row, "period_T_s")),
                        WholeStage.seconds(nanos(row, "timeout_W_s")),
                        row.get("misses_k"),
                        WholeStage.seconds(lastsNanos),
                        WholeStage.seconds(atNanos),
                        cue));
    }

    private static long nanos(Map<String, String> row, String column) {
        return Math.round(CheckTable.number(row, column) * 1e9);
    }
}
