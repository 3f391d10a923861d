package steelyard.backends.behave;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.assertThatIllegalStateException;
import static steelyard.backends.behave.Trace.MILLI;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.backends.behave.BehaviourSettings.ProbeWork;
import steelyard.backends.behave.Change.Fail;
import steelyard.backends.behave.Change.FailProbe;
import steelyard.backends.behave.Change.FlapProbe;
import steelyard.backends.behave.Change.Hang;
import steelyard.backends.behave.Change.Heal;
import steelyard.backends.behave.Change.Kill;
import steelyard.backends.behave.Change.Refuse;
import steelyard.backends.behave.Change.Revive;
import steelyard.backends.behave.Change.Slow;
import steelyard.backends.behave.Change.When;

/** Small plays whose outcome is worked out by hand; times are milliseconds from the start. */
class BehaviourTest {

    private static final BehaviourSettings ONE_WORKER_ONE_WAITS =
            BehaviourSettings.of(1, 1, new ServiceTime.Fixed(10 * MILLI));

    private static Play play() {
        return new Play(ONE_WORKER_ONE_WAITS, 0);
    }

    // Service takes 10. #0 is in service 0..10, #1 waits and is served 10..20, #2 finds both full.
    @ParameterizedTest
    @ValueSource(longs = {0, -5, Long.MIN_VALUE, Long.MAX_VALUE - 12_000_000, Long.MAX_VALUE, 123_456_789_012_345L})
    void arrive_threeAtOnceFromAnyOrigin_servedWaitsTurnedAway(long origin) {
        Play play = new Play(ONE_WORKER_ONE_WAITS, origin);
        play.arrive(0, 0);
        play.arrive(1, 2);
        play.arrive(2, 3);
        assertThat(play.behaviour.nextDeadlineNanos()).isEqualTo(play.at(10));
        play.poll(10);
        assertThat(play.behaviour.nextDeadlineNanos()).isEqualTo(play.at(20));
        play.poll(30);
        assertThat(play.behaviour.hasDeadline()).isFalse();
        play.planned("3 #2.0 TURNED_AWAY 503", "10 #0.0 ANSWER 200", "20 #1.0 ANSWER 200");

        Figures figures = play.figures(30);
        assertThat(figures.received()).isEqualTo(3);
        assertThat(figures.answered()).isEqualTo(2);
        assertThat(figures.turnedAway()).isEqualTo(1);
        assertThat(figures.waitNanos()).isEqualTo(8 * MILLI);
        assertThat(figures.serviceNanos()).isEqualTo(20 * MILLI);
        assertThat(figures.heldIntegralNanos()).isEqualTo(28 * MILLI);
        assertThat(figures.busyWorkerNanos()).isEqualTo(20 * MILLI);
        assertThat(figures.peak()).isEqualTo(2);
    }

    @Test
    void poll_late_nextOneStillStartsWhenTheWorkerFreed() {
        Play play = play();
        play.arrive(0, 0);
        play.arrive(1, 1);
        play.poll(500);
        play.planned("10 #0.0 ANSWER 200", "20 #1.0 ANSWER 200");
    }

    @Test
    void arrive_atTheInstantOfAFinish_findsTheWorkerFree() {
        Play play = play();
        play.arrive(0, 0);
        play.arrive(1, 0);
        play.arrive(2, 10);
        play.poll(30);
        play.planned("10 #0.0 ANSWER 200", "20 #1.0 ANSWER 200", "30 #2.0 ANSWER 200");
    }

    @Test
    void arrive_earlierThanAnEarlierCall_countsAsThatOne() {
        Play play = play();
        play.poll(5);
        play.arrive(0, 2);
        play.poll(20);
        play.planned("15 #0.0 ANSWER 200");
    }

    @Test
    void arrive_withExtraWork_takesThatMuchLonger() {
        Play play = play();
        play.behaviour.arrive(0, 0, 0, 7 * MILLI, 0, play.trace);
        play.poll(17);
        play.planned("17 #0.0 ANSWER 200");
    }

    @Test
    void arrive_noWorkAtAll_answeredWithinTheCall() {
        Play play = new Play(BehaviourSettings.of(1, 0, new ServiceTime.Fixed(0)), 0);
        assertThat(play.arrive(0, 4)).isEqualTo(Behaviour.NOWHERE);
        play.planned("4 #0.0 ANSWER 200");
        assertThat(play.behaviour.hasDeadline()).isFalse();
    }

    @Test
    void nextDeadline_nothingPlanned_throws() {
        assertThatIllegalStateException().isThrownBy(() -> play().behaviour.nextDeadlineNanos());
    }

    @Test
    void answer_ofTheSettings_hasTheirStatus() {
        Play play = new Play(ONE_WORKER_ONE_WAITS.withAnswer(204, 0), 0);
        play.arrive(0, 0);
        play.poll(10);
        play.planned("10 #0.0 ANSWER 204");
    }

    // #0 started before the cue and keeps 10; #1 starts at 10, after it: 10 * 3 + 5 = 35.
    @Test
    void slow_oneInServiceOneWaiting_onlyTheWaitingOneIsSlowed() {
        Play play = play();
        play.arrive(0, 0);
        play.arrive(1, 1);
        play.apply(new Slow(3, 5 * MILLI, false), 2);
        play.probe(0, 3);
        play.apply(Heal.all(), 11);
        play.arrive(2, 45);
        play.poll(100);
        play.planned("3 probe 0 ANSWER 200", "10 #0.0 ANSWER 200", "45 #1.0 ANSWER 200", "55 #2.0 ANSWER 200");
    }

    // What the fault adds to one demand: 10 * 3 + 5 - 10 = 25. The probe holds no worker meanwhile.
    @Test
    void slow_probesToo_freeProbeIsLateAndHoldsNoWorker() {
        Play play = play();
        play.apply(new Slow(3, 5 * MILLI, true), 0);
        play.probe(0, 1);
        play.apply(Heal.all(), 2);
        play.arrive(0, 3);
        play.poll(40);
        play.planned("13 #0.0 ANSWER 200", "26 probe 0 ANSWER 200");
        assertThat(play.figures(40).busyWorkerNanos()).isEqualTo(10 * MILLI);
    }

    @Test
    void probe_queued_waitsItsTurnAndHoldsAWorker() {
        Play play = new Play(ONE_WORKER_ONE_WAITS.withProbeWork(ProbeWork.QUEUED), 0);
        play.arrive(0, 0);
        play.probe(0, 1);
        play.probe(1, 2);
        play.poll(20);
        play.planned("2 probe 1 TURNED_AWAY 503", "10 #0.0 ANSWER 200", "20 probe 0 ANSWER 200");

        Figures figures = play.figures(20);
        assertThat(figures.received()).isEqualTo(1);
        assertThat(figures.probes()).isEqualTo(2);
        assertThat(figures.probesFailed()).isEqualTo(1);
        assertThat(figures.busyWorkerNanos()).isEqualTo(20 * MILLI);
        assertThat(figures.heldIntegralNanos()).isEqualTo(10 * MILLI);
    }

    @Test
    void fail_atOnce_answersWhenServiceWouldStartAndFreesTheWorker() {
        Play play = play();
        play.arrive(0, 0);
        play.apply(new Fail(1, 500, When.AT_ONCE, false), 1);
        play.arrive(1, 2);
        play.probe(0, 3);
        play.arrive(2, 12);
        play.poll(20);
        play.planned("3 probe 0 ANSWER 200", "10 #0.0 ANSWER 200", "10 #1.0 FAULT 500", "12 #2.0 FAULT 500");
        assertThat(play.figures(20).failed()).isEqualTo(2);
    }

    @Test
    void fail_afterWork_holdsTheWorkerToTheEnd() {
        Play play = play();
        play.apply(new Fail(1, 502, When.AFTER_WORK, true), 0);
        play.arrive(0, 0);
        play.probe(0, 1);
        play.poll(10);
        play.planned("1 probe 0 FAULT 502", "10 #0.0 FAULT 502");
        assertThat(play.figures(10).busyWorkerNanos()).isEqualTo(10 * MILLI);
    }

    @Test
    void fail_share_strikesTheRequestsDrawnForIt() {
        BehaviourSettings many = BehaviourSettings.of(1, 0, new ServiceTime.Fixed(0));
        Play play = new Play(many, 0);
        play.apply(new Fail(0.3, 500, When.AT_ONCE, false), 0);
        Chance chance = new Chance(7);
        long struck = 0;
        for (int request = 0; request < 10_000; request++) {
            play.arrive(request, request);
            struck += chance.unit(Stream.FAULT, request, 0) < 0.3 ? 1 : 0;
        }
        assertThat(play.figures(10_000).failed()).isEqualTo(struck);
        // Binomial: 4 standard deviations of 10,000 draws with chance 0.3 are 183.
        assertThat(struck).isBetween(2_817L, 3_183L);
    }

    // #0 is in service and finishes; #1 waits and falls silent with the hang; #2 comes under it. After the heal #3 is
    // served as ever.
    @Test
    void hang_inServiceFinishesAllElseIsSilent() {
        Play play = play();
        play.arrive(0, 0);
        play.arrive(1, 1);
        play.apply(new Hang(), 2);
        play.arrive(2, 3);
        play.probe(0, 4);
        play.poll(15);
        play.apply(Heal.all(), 20);
        play.arrive(3, 21);
        play.probe(1, 22);
        play.poll(40);
        play.planned(
                "2 #1.0 SILENCE 0",
                "3 #2.0 SILENCE 0",
                "4 probe 0 SILENCE 0",
                "10 #0.0 ANSWER 200",
                "22 probe 1 ANSWER 200",
                "31 #3.0 ANSWER 200");
        assertThat(play.figures(40).unanswered()).isEqualTo(2);
        assertThat(play.figures(40).waitNanos()).isEqualTo(1 * MILLI);
    }

    @Test
    void refuse_onlyShutsTheDoor() {
        Play play = play();
        play.arrive(0, 0);
        play.apply(new Refuse(), 1);
        play.apply(new Refuse(), 2);
        play.arrive(1, 3);
        play.apply(Heal.all(), 15);
        play.poll(20);
        play.planned("1 shut", "10 #0.0 ANSWER 200", "15 open", "20 #1.0 ANSWER 200");
    }

    @Test
    void kill_losesAllAndOnlyReviveOpensAgain() {
        Play play = play();
        play.arrive(0, 0);
        play.arrive(1, 1);
        play.apply(new Kill(), 4);
        play.apply(Heal.all(), 5);
        play.arrive(2, 6);
        play.probe(0, 7);
        play.apply(new Revive(), 20);
        play.arrive(3, 21);
        play.poll(40);
        play.planned(
                "4 shut",
                "4 #0.0 LOST 0",
                "4 #1.0 LOST 0",
                "4 reset",
                "6 #2.0 LOST 0",
                "7 probe 0 LOST 0",
                "20 open",
                "31 #3.0 ANSWER 200");

        Figures figures = play.figures(40);
        assertThat(figures.lost()).isEqualTo(3);
        assertThat(figures.serviceNanos()).isEqualTo(14 * MILLI);
        assertThat(figures.waitNanos()).isEqualTo(3 * MILLI);
        assertThat(figures.busyWorkerNanos()).isEqualTo(14 * MILLI);
    }

    @Test
    void revive_startsWithoutTheFaultsOfBeforeAndOfTheMeantime() {
        Play play = play();
        play.apply(new Hang(), 0);
        play.apply(new Kill(), 1);
        play.apply(new Refuse(), 2);
        play.apply(new FailProbe(), 3);
        play.apply(new Revive(), 4);
        play.arrive(0, 5);
        play.probe(0, 6);
        play.poll(20);
        play.planned("1 shut", "1 reset", "4 open", "6 probe 0 ANSWER 200", "15 #0.0 ANSWER 200");
    }

    @Test
    void revive_ofARunningOne_changesNothing() {
        Play play = play();
        play.apply(new FailProbe(), 0);
        play.apply(new Revive(), 1);
        play.probe(0, 2);
        play.planned("2 probe 0 FAULT 503");
    }

    @Test
    void failProbe_trafficGoesOn() {
        Play play = play();
        play.apply(new FailProbe(), 0);
        play.arrive(0, 0);
        play.probe(0, 1);
        play.apply(new Heal(Change.Kind.FAIL_PROBE), 2);
        play.probe(1, 3);
        play.poll(10);
        play.planned("1 probe 0 FAULT 503", "3 probe 1 ANSWER 200", "10 #0.0 ANSWER 200");
    }

    @Test
    void probe_lost_isDrawnByBackendAndProbeAndCostsNoWorker() {
        BehaviourSettings lossy = ONE_WORKER_ONE_WAITS.withProbeLoss(0.25);
        Play play = new Play(lossy, 0);
        play.arrive(0, 0);
        for (int probe = 0; probe < 10_000; probe++) {
            play.probe(probe, 1);
        }
        long lost = play.trace.lines.stream()
                .filter(line -> line.endsWith("SILENCE 0"))
                .count();
        // Binomial: 4 standard deviations of 10,000 draws with chance 0.25 are 174.
        assertThat(lost).isBetween(2_326L, 2_674L);
        assertThat(play.trace.lines).hasSize(10_000);
        assertThat(play.figures(2).probesFailed()).isEqualTo(lost);

        Play queued = new Play(lossy.withProbeWork(ProbeWork.QUEUED).withProbeLoss(1), 0);
        queued.probe(0, 1);
        queued.arrive(0, 2);
        queued.poll(12);
        queued.planned("1 probe 0 SILENCE 0", "12 #0.0 ANSWER 200");
    }

    // From the cue at 2 with period 10: bad in [2,7), good in [7,12), bad in [12,17).
    @Test
    void flapProbe_firstHalfBadSecondHalfGood() {
        Play play = play();
        play.apply(new FlapProbe(10 * MILLI), 2);
        play.probe(0, 2);
        play.probe(1, 6);
        play.probe(2, 7);
        play.probe(3, 11);
        play.probe(4, 12);
        play.planned(
                "2 probe 0 FAULT 503",
                "6 probe 1 FAULT 503",
                "7 probe 2 ANSWER 200",
                "11 probe 3 ANSWER 200",
                "12 probe 4 FAULT 503");
    }

    @Test
    void heal_ofOneKind_leavesTheOthers() {
        Play play = play();
        play.apply(new FailProbe(), 0);
        play.apply(new Slow(2, 0, false), 0);
        play.apply(new Heal(Change.Kind.SLOW), 1);
        play.arrive(0, 2);
        play.probe(0, 3);
        play.poll(20);
        play.planned("3 probe 0 FAULT 503", "12 #0.0 ANSWER 200");
    }

    @Test
    void heal_ofAKill_isNotAChange() {
        assertThatIllegalArgumentException().isThrownBy(() -> new Heal(Change.Kind.KILL));
    }

    @Test
    void abandon_inServiceAndWaiting_workGoesOnAndIsDropped() {
        Play play = play();
        int served = play.arrive(0, 0);
        int waits = play.arrive(1, 1);
        play.behaviour.abandon(served, 0, play.at(2), play.trace);
        play.behaviour.abandon(waits, 1, play.at(3), play.trace);
        play.behaviour.abandon(waits, 1, play.at(3), play.trace);
        Figures meanwhile = play.figures(4);
        assertThat(meanwhile.abandoned()).isEqualTo(2);
        assertThat(meanwhile.dropped()).isZero();
        assertThat(meanwhile.inService() + meanwhile.waiting()).isEqualTo(2);
        play.poll(20);
        play.planned("10 #0.0 DROPPED 0", "20 #1.0 DROPPED 0");
        assertThat(play.figures(20).dropped()).isEqualTo(2);
    }

    @Test
    void abandon_afterTheEnd_isNothing() {
        Play play = play();
        int place = play.arrive(0, 0);
        play.behaviour.abandon(place, 0, play.at(10), play.trace);
        play.behaviour.abandon(Behaviour.NOWHERE, 0, play.at(11), play.trace);
        play.planned("10 #0.0 ANSWER 200");
        assertThat(play.figures(11).abandoned()).isZero();
    }

    @Test
    void utilisation_betweenTwoSnapshots_isTheBusyShare() {
        Play play = play();
        Figures before = play.figures(5);
        play.arrive(0, 10);
        assertThat(play.figures(45).utilisationSince(before)).isEqualTo(0.25);
        assertThatIllegalArgumentException().isThrownBy(() -> before.utilisationSince(before));
    }
}
