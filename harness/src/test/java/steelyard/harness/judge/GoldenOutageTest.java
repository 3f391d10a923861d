package steelyard.harness.judge;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.record.TestDrill.FULMAR;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.S;
import static steelyard.harness.record.TestDrill.cue;
import static steelyard.harness.record.TestDrill.fulmar;

import org.junit.jupiter.api.Test;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Measure;
import steelyard.harness.record.Finding;
import steelyard.harness.record.TestDrill;
import steelyard.harness.record.Verdict;

/**
 * One outage from end to end. A request each 10 ms for 10 s, 1,000 in all, in turns fulmar, gannet, petrel, answered
 * after 20 ms. Fulmar is refused from 3 s (tick 300) and taken out at 5.6 s (tick 560): of ticks 300..559, every third
 * fails, and 300 = 3 * 100, so 300, 303, ... 558: 87 requests. No retry. Then gannet and petrel take turns.
 */
class GoldenOutageTest {
    private static final Cue KILL = cue(3 * S, Cue.Kind.KILL, fulmar());
    private static final int FAILED = 87;

    private static Drill drill(double mostFailed) {
        return new TestDrill()
                .cue(KILL)
                .expect(Expect.that(Measure.FAILED).atMost(mostFailed).build())
                .expect(Expect.that(Measure.DETECTED_IN)
                        .after(KILL.name())
                        .between(1.9e9, 3.2e9)
                        .build())
                .expect(Expect.that(Measure.SHIFTED_IN)
                        .after(KILL.name())
                        .atMost(3e9)
                        .build())
                .expect(Expect.that(Measure.SHARE)
                        .of(fulmar())
                        .from(6 * S)
                        .atMost(0)
                        .build())
                .build();
    }

    private static Play outage() {
        Play play = new Play()
                .cue(3 * S, KILL)
                .stood(5_600 * MS, FULMAR, Standing.UP, Standing.DOWN, Transition.Cause.MISSES);
        for (int tick = 0; tick < 1_000; tick++) {
            long at = tick * 10 * MS;
            int backend = tick < 560 ? tick % 3 : 1 + tick % 2;
            boolean refused = backend == FULMAR && at >= 3 * S;
            play.attempt(at, refused ? 0 : 20 * MS, backend, tick, 1, refused ? Outcome.REFUSED : Outcome.ANSWERED);
            play.request(at, refused ? 0 : 20 * MS, refused ? Cause.REFUSED : null);
        }
        return play;
    }

    @Test
    void verdict_outageWithinBounds_isMetAndNamesTheTightest() {
        Verdict verdict = outage().verdict(drill(0.09), 10 * S + 20 * MS, true);

        assertThat(verdict.fit()).as(verdict.text()).isTrue();
        assertThat(verdict.met()).isTrue();
        assertThat(verdict.expectations())
                .extracting(Finding::value)
                .containsExactly(FAILED / 1_000.0, 2.6e9, 2.6e9, 0.0);
        // Slack: failed 0.003 of 0.09, detected 0.6 of 1.3, shifted 0.4 of 3; a share of at most 0 has none to speak
        // of.
        assertThat(verdict.text())
                .isEqualTo("Met: all 4 expectations held; tightest: failed, whole play: 8.7 %, bound at most 9 %.");
    }

    @Test
    void verdict_oneBoundMissed_isNotMetAndNamesTheWorst() {
        Verdict verdict = outage().verdict(drill(0.003), 10 * S + 20 * MS, true);

        assertThat(verdict.met()).isFalse();
        assertThat(verdict.expectations().get(0).marginText()).isEqualTo("missed by 8.4 %");
        assertThat(verdict.text())
                .isEqualTo(
                        "Not met: 1 of 4 expectations missed; worst: failed, whole play: 8.7 %, bound at most 0.3 %.");
    }

    @Test
    void verdict_standardSet_isTheSameForEveryPlay() {
        Verdict verdict = outage().verdict(new TestDrill().build(), 10 * S + 20 * MS, true);

        assertThat(verdict.text()).isEqualTo("Met: nothing was expected.");
        assertThat(verdict.measures())
                .extracting(each -> each.text() + " = " + each.measured())
                .contains(
                        "failed, whole play = 8.7 %",
                        "longest-outage, whole play = 0 s",
                        "latency 99 %, whole play = infinite",
                        "latency mean, whole play = 20 ms",
                        "share of fulmar, whole play = 18.7 %",
                        "retry-load, whole play = 1",
                        "standing-changes, whole play = 1",
                        "peak-in-flight, whole play = 2",
                        "cut, whole play = 0")
                .hasSize(20);
    }
}
