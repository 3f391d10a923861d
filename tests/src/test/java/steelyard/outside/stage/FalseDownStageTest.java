package steelyard.outside.stage;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.outside.CheckTable.number;

import java.util.Map;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.harness.record.PlayListener;
import steelyard.outside.CheckTable;
import steelyard.outside.behave.Sample;

/**
 * How many probes it takes until healthy backends are called down by chance, when each probe is lost with chance p:
 * (1 - p^k) / ((1 - p) p^k) in the mean (false_down.csv; Feller vol. 1, 3rd ed. 1968, XIII.7, from memory). One play with
 * 1,600 backends, each with draws of its own.
 */
class FalseDownStageTest {
    private static final int BACKENDS = 1_600;
    private static final long SEED = 5;
    /** A miss for the longest run of a hundred plays: exp(-20) times 1,600. */
    private static final int LONGEST = 20;

    @ParameterizedTest
    @CsvSource({"1, 0.05", "2, 0.2", "2, 0.1", "3, 0.2"})
    void probesUntilDown_lostByChance_areAsManyAsDerived(int misses, double loss) {
        Map<String, String> row = CheckTable.row(
                FalseDownStageTest.class,
                "/steelyard/outside/core/false_down.csv",
                r -> number(r, "misses_k") == misses
                        && number(r, "miss_probability_p") == loss
                        && number(r, "period_T_s") == 1);
        double mean = number(row, "mean_probes");
        FirstDowns downs = new FirstDowns();
        WholeStage.play(
                WholeStage.read("""
                        drill: Called down by chance
                        about: Every backend is well, and each probe of one may be lost.
                        stage:
                          pools:
                            seats:
                              method: round-robin
                              probe: {path: /afloat, every: 100ms, within: 10ms, misses: %d}
                              serves: {workers: 1, time: 1ms, probe-loss: %s%%}
                              backends: {fulmar: {times: %d}}
                        traffic: [{to: seats, rate: 1/s}]
                        lasts: %ds
                        """.formatted(misses, loss * 100, BACKENDS, Math.round(mean * LONGEST / 10))),
                SEED,
                downs);
        Sample probes = new Sample(BACKENDS);
        for (int backend = 0; backend < BACKENDS; backend++) {
            assertThat(downs.down[backend]).isTrue();
            probes.add(downs.probes[backend]);
        }
        probes.mustAgreeWith("probes until down", mean, 0.03);
    }

    /** Counts the probes of each backend up to its first time down. */
    private static final class FirstDowns implements PlayListener {
        final long[] probes = new long[BACKENDS];
        final boolean[] down = new boolean[BACKENDS];

        @Override
        public void probed(long atNanos, int backend, long probe, boolean passed) {
            probes[backend] += down[backend] ? 0 : 1;
        }

        @Override
        public void stood(Transition transition) {
            down[transition.backend()] |= transition.to() == Standing.DOWN;
        }
    }
}
