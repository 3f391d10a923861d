package steelyard.harness.judge;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener.By;

class TruthTest {
    private static Drill drill(String pool, String backends, String cues) {
        return DrillReader.read("truth.yaml", """
                drill: Who should serve
                about: Weights that are due.
                stage:
                  pools:
                    seats:
                %s
                      serves: {workers: 4, time: 5ms}
                      backends: {%s}
                traffic: [{to: seats, rate: 100/s}]
                lasts: 60s
                cues: [%s]
                """.formatted(pool.indent(6).stripTrailing(), backends, cues))
                .value()
                .orElseThrow();
    }

    private static void apply(Truth truth, Drill drill) {
        drill.cues().forEach(cue -> truth.applied(cue, By.DRILL));
    }

    @Test
    void weight_retunedToAMethodThatDoesNotWeigh_isTheSameForAllUntilItWeighsAgain() {
        Drill drill = drill(
                "method: weighted-round-robin",
                "fulmar: {weight: 3}, gannet: {weight: 1}",
                "{at: 10s, retune: {pool: seats}, method: round-robin}");
        Truth truth = new Truth(new Cast(drill));
        assertThat(truth.weight(0)).isEqualTo(3);

        apply(truth, drill);
        assertThat(truth.weight(0)).isEqualTo(1);
        // A weight set meanwhile counts as soon as the method weighs.
        truth.reweighed(0, 5);
        assertThat(truth.weight(0)).isEqualTo(1);

        apply(
                truth,
                drill(
                        "method: round-robin",
                        "fulmar: {weight: 3}, gannet: {weight: 1}",
                        "{at: 10s, retune: {pool: seats}, method: stride}"));
        assertThat(truth.weight(0)).isEqualTo(5);
    }

    @Test
    void weight_tierOneExactlyAtTheStandbyShare_leavesTierTwoOut() {
        // 55 % of 20 are 11 in decimal fractions, and a little more in binary ones. Nine of tier 1 are gone: 11 serve.
        String backends = "fulmar: {times: 20}, skua: {tier: 2}";
        Drill drill = drill(
                "method: round-robin\nstandby: 55%",
                backends,
                "{at: 10s, kill: [fulmar-1, fulmar-2, fulmar-3, fulmar-4, fulmar-5, fulmar-6, fulmar-7, fulmar-8,"
                        + " fulmar-9]}");
        Truth truth = new Truth(new Cast(drill));
        apply(truth, drill);
        assertThat(truth.weight(20)).isZero();

        apply(truth, drill("method: round-robin\nstandby: 55%", backends, "{at: 10s, kill: fulmar-10}"));
        assertThat(truth.weight(20)).isEqualTo(1);
    }
}
