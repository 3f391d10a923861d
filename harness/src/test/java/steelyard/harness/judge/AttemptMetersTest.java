package steelyard.harness.judge;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static steelyard.harness.record.TestDrill.FULMAR;
import static steelyard.harness.record.TestDrill.GANNET;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.PETREL;
import static steelyard.harness.record.TestDrill.S;
import static steelyard.harness.record.TestDrill.SKUA;
import static steelyard.harness.record.TestDrill.backends;
import static steelyard.harness.record.TestDrill.fulmar;

import java.util.List;
import org.junit.jupiter.api.Test;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Target;
import steelyard.harness.record.Finding;

class AttemptMetersTest {

    @Test
    void share_ofBackend_isOverItsPoolByPickTime() {
        // Window [1 s, 2 s): fulmar 1 (at 1.0), gannet 2, petrel 1; skua is of another pool; 0.999 and 2.0 are outside.
        Play play = new Play()
                .attempt(999 * MS, 2 * S, FULMAR)
                .attempt(S, MS, FULMAR)
                .attempt(1_200 * MS, MS, GANNET)
                .attempt(1_300 * MS, MS, GANNET)
                .attempt(1_999 * MS, MS, PETREL)
                .attempt(1_500 * MS, MS, SKUA)
                .attempt(2 * S, MS, FULMAR);

        Finding found = play.finding(
                Expect.that(Measure.SHARE).of(fulmar()).from(S).to(2 * S).drill());

        assertThat(found.value()).isEqualTo(0.25);
        assertThat(found.measured()).isEqualTo("25 %");
        assertThat(found.of()).isEqualTo("fulmar");
    }

    @Test
    void share_ofHostWithTwoPools_isOverBothPoolsTogether() {
        // south-quay carries gannet (seats) and skua (cargo): 1 + 2 of 3 + 2.
        Target host = new Target(Target.Kind.HOST, "south-quay", List.of("gannet", "skua"));
        Play play = new Play()
                .attempt(S, MS, FULMAR)
                .attempt(S, MS, GANNET)
                .attempt(S, MS, PETREL)
                .attempt(S, MS, SKUA)
                .attempt(S, MS, SKUA);

        assertThat(play.finding(Expect.that(Measure.SHARE).of(host).drill()).value())
                .isEqualTo(0.6);
    }

    @Test
    void share_nothingPicked_isNotMeasured() {
        assertThat(new Play()
                        .finding(Expect.that(Measure.SHARE).of(fulmar()).drill())
                        .note())
                .isEqualTo("nothing was picked");
    }

    @Test
    void fairness_dividesByEntitledTimeAndLeavesOutWhoHadNone() {
        // Entitled to 1/4 and 3/4 of one second: fulmar 5 picks, gannet 5. x = 5/0.25 = 20, 5/0.75 = 6.667.
        // (26.667)^2 / (2 * (400 + 44.444)) = 711.11 / 888.89 = 0.8. Petrel had no entitlement: its pick counts
        // nowhere.
        Play play = new Play().sample(S, sample -> {
            sample.entitledShare[FULMAR] = 0.25;
            sample.entitledShare[GANNET] = 0.75;
        });
        for (int i = 0; i < 5; i++) {
            play.attempt(500 * MS, MS, FULMAR).attempt(500 * MS, MS, GANNET);
        }
        play.attempt(500 * MS, MS, PETREL);
        Target pool = new Target(Target.Kind.POOL, "seats", List.of("fulmar", "gannet", "petrel"));

        Finding found =
                play.finding(Expect.that(Measure.FAIRNESS).of(pool).to(S).drill());

        assertThat(found.value()).isCloseTo(0.8, within(1e-12));
        assertThat(found.measured()).isEqualTo("0.8");
    }

    @Test
    void fairness_nothingPicked_isNotMeasured() {
        Play play = new Play().sample(S, sample -> sample.entitledShare[FULMAR] = 1);

        assertThat(play.finding(Expect.that(Measure.FAIRNESS).drill()).measured())
                .isEqualTo("not measured");
    }

    @Test
    void retryLoad_isAttemptsOverFirstAttempts_andWorstSecond() {
        // Ten first attempts, one each second; the one at 4 s is tried three times within a second: 12 of 10, worst 3.
        Play play = new Play();
        for (int i = 0; i < 10; i++) {
            play.attempt(i * S, MS, GANNET, i, 1, Outcome.ANSWERED);
        }
        play.attempt(4_100 * MS, MS, FULMAR, 4, 2, Outcome.REFUSED);
        play.attempt(4_200 * MS, MS, PETREL, 4, 3, Outcome.ANSWERED);

        assertThat(play.finding(Expect.that(Measure.RETRY_LOAD).drill()).value())
                .isEqualTo(1.2);
        assertThat(play.finding(Expect.that(Measure.RETRY_LOAD).worst(S).drill())
                        .value())
                .isEqualTo(3);
        assertThat(new Play().finding(Expect.that(Measure.RETRY_LOAD).drill()).note())
                .isEqualTo("no request was attempted");
    }

    @Test
    void cut_countsCutAttemptsOfTheTargetInTheWindow() {
        Play play = new Play()
                .attempt(S, S, FULMAR, 0, 1, Outcome.CUT)
                .attempt(S, S, FULMAR, 1, 1, Outcome.RESET)
                .attempt(S, S, GANNET, 2, 1, Outcome.CUT)
                .attempt(S, 9 * S, FULMAR, 3, 1, Outcome.CUT);

        assertThat(play.finding(Expect.that(Measure.CUT).of(fulmar()).drill()).value())
                .isEqualTo(1);
        assertThat(play.finding(Expect.that(Measure.CUT).drill()).value()).isEqualTo(2);
        assertThat(new Play().finding(Expect.that(Measure.CUT).drill()).value()).isZero();
    }

    @Test
    void standingChanges_countsPickableChanges_orShownWords() {
        // fulmar: up, down, warming, up: two changes of pickable, three of the word; gannet one more of each.
        Play play = new Play()
                .stood(S, FULMAR, Standing.UP, Standing.DOWN, Transition.Cause.MISSES)
                .stood(2 * S, FULMAR, Standing.DOWN, Standing.WARMING, Transition.Cause.PASSES)
                .stood(3 * S, FULMAR, Standing.WARMING, Standing.UP, Transition.Cause.RAMPED)
                .stood(4 * S, GANNET, Standing.UP, Standing.DRAINING, Transition.Cause.DRAIN);
        Expect all = Expect.that(Measure.STANDING_CHANGES);

        assertThat(play.finding(all.drill()).value()).isEqualTo(3);
        assertThat(play.finding(all.of(backends("fulmar", "gannet")).drill()).value())
                .isEqualTo(2);
        assertThat(play.finding(all.shown().drill()).value()).isEqualTo(3);
        assertThat(play.finding(all.from(2 * S).to(3 * S).drill()).value()).isEqualTo(1);
        assertThat(new Play().finding(all.drill()).value()).isZero();
    }

    @Test
    void peakInFlight_ofStageIsTogether_ofTargetIsWorstMember() {
        // fulmar: 2 in flight over [1 s, 2 s); gannet: 1 over [1.5 s, 3 s). Together 3 at 1.5 s.
        Play play = new Play().attempt(S, S, FULMAR).attempt(S, S, FULMAR).attempt(1_500 * MS, 1_500 * MS, GANNET);
        Expect peak = Expect.that(Measure.PEAK_IN_FLIGHT);

        assertThat(play.finding(peak.drill()).value()).isEqualTo(3);
        assertThat(play.finding(peak.of(backends("fulmar", "gannet")).drill()).value())
                .isEqualTo(2);
    }

    @Test
    void peakInFlight_levelFromBeforeTheWindow_counts() {
        // Both were picked before the window [1.2 s, 1.4 s) and end behind it: no event inside, but two in flight.
        Play play = new Play().attempt(S, S, FULMAR).attempt(S, 8 * S, FULMAR);

        assertThat(play.finding(Expect.that(Measure.PEAK_IN_FLIGHT)
                                .from(1_200 * MS)
                                .to(1_400 * MS)
                                .drill())
                        .value())
                .isEqualTo(2);
        assertThat(play.finding(Expect.that(Measure.PEAK_IN_FLIGHT)
                                .of(fulmar())
                                .from(2 * S)
                                .to(9 * S)
                                .drill())
                        .value())
                .isEqualTo(1);
        assertThat(new Play()
                        .finding(Expect.that(Measure.PEAK_IN_FLIGHT).drill())
                        .value())
                .isZero();
    }

    @Test
    void peakUtilisation_overOneSecond_ofBusiestMember() {
        // Two workers. Fulmar is busy with both from 0.5 s to 1.5 s: the second that begins at 0.5 s is full. Gannet
        // is busy with one all the time: half.
        Play play = new Play();
        for (int slice = 1; slice <= 30; slice++) {
            long at = slice * 100 * MS;
            long fulmarBusy = 2 * Math.max(0, Math.min(at, 1_500 * MS) - 500 * MS);
            play.sample(at, sample -> {
                sample.busyNanos[FULMAR] = fulmarBusy;
                sample.busyNanos[GANNET] = at;
            });
        }
        Expect peak = Expect.that(Measure.PEAK_UTILISATION);

        assertThat(play.finding(peak.of(backends("fulmar", "gannet")).drill()).value())
                .isEqualTo(1);
        assertThat(play.finding(peak.of(backends("gannet")).drill()).value()).isEqualTo(0.5);
        // From 1.2 s fulmar is busy for 0.3 s more: 0.3 of a second.
        assertThat(play.finding(peak.of(fulmar()).from(1_200 * MS).drill()).value())
                .isCloseTo(0.3, within(1e-12));
        // A window of 0.4 s is one stretch: 0.3 of 0.4.
        assertThat(play.finding(peak.to(1_600 * MS).drill()).value()).isCloseTo(0.75, within(1e-12));
    }

    @Test
    void peakUtilisation_withoutSamples_isNotMeasured() {
        assertThat(new Play()
                        .finding(Expect.that(Measure.PEAK_UTILISATION).drill())
                        .measured())
                .isEqualTo("not measured");
    }
}
