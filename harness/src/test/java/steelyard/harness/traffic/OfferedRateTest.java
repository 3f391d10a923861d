package steelyard.harness.traffic;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;

class OfferedRateTest {
    @Test
    void peak_isTheHighestSumOfStepsTimesSurges() {
        // 0 s: 100 + 40; 4 s: 50 + 40; 5 s to 7 s: 3 x 50 + 40 = 190; 7 s: 50 + 40.
        assertThat(OfferedRate.peakPerSecond(drill("  - {at: 5s, surge: {pool: seats}, factor: 3, for: 2s}")))
                .isEqualTo(190);
    }

    @Test
    void peak_surgeBeforeAStep_countsWithTheStepUnderIt() {
        assertThat(OfferedRate.peakPerSecond(drill("  - {at: 1s, surge: {pool: cargo}, factor: 10}")))
                .isEqualTo(500);
    }

    private static Drill drill(String cue) {
        return DrillReader.read("test", """
                        drill: Rates
                        about: Rates
                        stage:
                          pools:
                            seats:
                              method: round-robin
                              serves: {workers: 1, queue: 1, time: {fixed: 1ms}}
                              backends: {fulmar: {}}
                            cargo:
                              method: round-robin
                              serves: {workers: 1, queue: 1, time: {fixed: 1ms}}
                              backends: {skua: {}}
                        traffic:
                          - {to: seats, steps: [{for: 4s, rate: 100/s}, {for: 4s, rate: 50/s}], give-up: 1s}
                          - {to: cargo, rate: 40/s}
                        lasts: 8s
                        cues:
                        """ + cue + "\n").value().orElseThrow();
    }
}
