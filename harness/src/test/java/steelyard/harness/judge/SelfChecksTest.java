package steelyard.harness.judge;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.record.TestDrill.FULMAR;
import static steelyard.harness.record.TestDrill.GANNET;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.S;
import static steelyard.harness.record.TestDrill.SKUA;

import org.junit.jupiter.api.Test;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Drill;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.TestDrill;
import steelyard.harness.record.Verdict;

class SelfChecksTest {
    private static final Drill DRILL = new TestDrill().build();
    private static final String ATTEMPTS = "attempts as balancer and backends count them";

    private static SelfCheck check(Verdict verdict, String name) {
        return verdict.checks().stream()
                .filter(each -> each.check().equals(name))
                .findFirst()
                .orElseThrow();
    }

    private static void assertOnlyFails(Play play, String name, String text) {
        Verdict verdict = play.verdict(DRILL);
        assertThat(verdict.fit()).isFalse();
        assertThat(verdict.checks().stream().filter(each -> !each.ok()).map(SelfCheck::check))
                .containsExactly(name);
        assertThat(check(verdict, name).text()).contains(text);
        assertThat(verdict.text()).startsWith("Unfit to judge: " + name);
    }

    /** A hundred requests, each attempted once and answered. */
    private static Play sound() {
        Play play = new Play();
        for (int i = 0; i < 100; i++) {
            play.attempt(i * 50 * MS, 20 * MS, i % 3, i, 1, Outcome.ANSWERED);
            play.request(i * 50 * MS, 20 * MS, null);
        }
        return play;
    }

    @Test
    void read_soundPlay_isFit() {
        Verdict verdict = sound().verdict(DRILL);

        assertThat(verdict.checks()).allMatch(SelfCheck::ok).hasSize(7);
        assertThat(verdict.fit()).isTrue();
        assertThat(check(verdict, "requests add up").text()).isEqualTo("100 offered, 100 good, 0 failed, each once");
        assertThat(check(verdict, ATTEMPTS).text()).isEqualTo("100 agree");
        assertThat(check(verdict, "lateness of the generator").text()).isEqualTo("99 % within 0 s (limit 5 ms)");
    }

    @Test
    void read_lateGenerator_isUnfitFromMoreThanOneInAHundred() {
        Play one = sound().at(6 * S, to -> to.requestSent(6 * S, 7, 6 * S - 6 * MS));
        assertThat(one.verdict(DRILL).fit()).isTrue();

        Play two = one.at(6 * S, to -> to.requestSent(6 * S, 8, 6 * S - 6 * MS));
        assertOnlyFails(two, "lateness of the generator", "(limit 5 ms)");
    }

    @Test
    void read_capHit_isUnfit() {
        assertOnlyFails(sound().at(S, to -> to.connectionCapHit(S)), "connection cap", "hit 1 time");
    }

    @Test
    void read_requestThatNeverEnded_isUnfit() {
        assertOnlyFails(sound().at(S, to -> to.requestDue(S, 500, 0, 0, 0)), "requests add up", "1 never ended");
    }

    @Test
    void read_requestThatEndedTwice_isUnfit() {
        Play play = sound().at(7 * S, to -> to.requestEnded(7 * S, 3, S, 0, 0, null, 200));
        assertOnlyFails(play, "requests add up", "1 ended twice or were never due");
    }

    @Test
    void read_oneLostAndOneDoubleEnd_doNotCancel() {
        Play play = sound().at(S, to -> to.requestDue(S, 500, 0, 0, 0))
                .at(7 * S, to -> to.requestEnded(7 * S, 3, S, 0, 0, null, 200));
        assertOnlyFails(play, "requests add up", "1 never ended, 1 ended twice");
    }

    @Test
    void read_backendCompletionLost_isUnfit() {
        Play play = sound().picked(6 * S, FULMAR, 700, 1)
                .at(6 * S, to -> to.backendReceived(6 * S, FULMAR, 700, 1))
                .ended(6_100 * MS, FULMAR, 700, 1, Outcome.ANSWERED, 200);
        assertOnlyFails(play, ATTEMPTS, "1 answered but never ended by a backend");
    }

    @Test
    void read_answeredByNobody_isUnfit() {
        Play play = sound().picked(6 * S, FULMAR, 700, 1).ended(6_100 * MS, FULMAR, 700, 1, Outcome.ANSWERED, 200);
        assertOnlyFails(play, ATTEMPTS, "1 answered but never ended by a backend");
    }

    @Test
    void read_balancerCompletionLost_isUnfitThoughTimesAgree() {
        Play play = sound().picked(6 * S, FULMAR, 700, 1)
                .at(6 * S, to -> to.backendReceived(6 * S, FULMAR, 700, 1))
                .at(6_100 * MS, to -> to.backendEnded(6_100 * MS, FULMAR, 700, 1, true, 200));
        assertOnlyFails(play, ATTEMPTS, "1 never ended by the balancer");
    }

    @Test
    void read_backendCompletionTwice_isUnfit() {
        Play play = sound().at(6 * S, to -> to.backendEnded(6 * S, FULMAR, 3, 1, true, 200));
        assertOnlyFails(play, ATTEMPTS, "1 ended by a backend twice");
    }

    @Test
    void read_balancerCompletionTwice_isUnfitInCountAndInTime() {
        Play play = sound().attempt(6 * S, S, FULMAR, 700, 1, Outcome.ANSWERED);
        // The second end of request 700 takes one more out of flight: 6.5 s to 7 s is counted as nobody in flight.
        play.at(6_500 * MS, to -> to.attemptEnded(6_500 * MS, FULMAR, 3, 1, Outcome.ANSWERED, 200, 0));

        Verdict verdict = play.verdict(DRILL);

        assertThat(check(verdict, ATTEMPTS).ok()).isFalse();
        assertThat(check(verdict, "time in flight").ok()).isFalse();
        assertThat(check(verdict, "time in flight").text())
                .isEqualTo("fulmar: in flight over time adds up to 1.18 s, its attempts to 1.68 s");
    }

    @Test
    void read_wrongCountInFlight_isUnfit() {
        Play play = sound().at(6 * S, to -> to.attemptPicked(6 * S, 0, FULMAR, 700, 1, 2))
                .at(6 * S, to -> to.backendReceived(6 * S, FULMAR, 700, 1))
                .at(6_100 * MS, to -> to.backendEnded(6_100 * MS, FULMAR, 700, 1, true, 200))
                .at(6_100 * MS, to -> to.attemptEnded(6_100 * MS, FULMAR, 700, 1, Outcome.ANSWERED, 200, 0));
        assertOnlyFails(
                play, "time in flight", "fulmar: in flight over time adds up to 880 ms, its attempts to 780 ms");
    }

    @Test
    void read_backendLosesTimeOfARequest_isUnfit() {
        Play play = sound().sample(6 * S, sample -> {
            sample.heldNanos[FULMAR] = 3 * S;
            sample.spentNanos[FULMAR] = 2 * S;
        });
        assertOnlyFails(play, "time in backends", "fulmar: held over time adds up to 3 s, waits and services to 2 s");
    }

    @Test
    void read_statusOrBackendDiffer_isUnfit() {
        Play status = sound().picked(6 * S, FULMAR, 700, 1)
                .at(6 * S, to -> to.backendReceived(6 * S, FULMAR, 700, 1))
                .at(6_100 * MS, to -> to.backendEnded(6_100 * MS, FULMAR, 700, 1, true, 503))
                .ended(6_100 * MS, FULMAR, 700, 1, Outcome.ANSWERED, 200);
        assertOnlyFails(status, ATTEMPTS, "1 told differently");

        Play backend = sound().attempt(6 * S, 100 * MS, FULMAR, 700, 1, Outcome.REFUSED)
                .picked(6_500 * MS, FULMAR, 701, 1)
                .at(6_500 * MS, to -> to.backendReceived(6_500 * MS, GANNET, 701, 1))
                .ended(6_600 * MS, FULMAR, 701, 1, Outcome.RESET, 0);
        assertOnlyFails(backend, ATTEMPTS, "1 read twice or by another backend");
    }

    @Test
    void read_refusedResetAndBelated_areListedApartAndFit() {
        Play play = sound().attempt(6 * S, 0, FULMAR, 700, 1, Outcome.REFUSED)
                .attempt(6 * S, 10 * MS, GANNET, 700, 2, Outcome.RESET)
                // Given up by the balancer before the backend had read it, and read later.
                .picked(7 * S, FULMAR, 701, 1)
                .ended(7_100 * MS, FULMAR, 701, 1, Outcome.ABANDONED, 0)
                .at(7_200 * MS, to -> to.backendReceived(7_200 * MS, FULMAR, 701, 1))
                .at(7_300 * MS, to -> to.backendEnded(7_300 * MS, FULMAR, 701, 1, false, 0))
                // Not of this play.
                .at(8 * S, to -> to.backendReceived(8 * S, FULMAR, -1, 0))
                .at(8 * S, to -> to.backendEnded(8 * S, FULMAR, -1, 0, true, 200));

        Verdict verdict = play.verdict(DRILL);

        assertThat(check(verdict, ATTEMPTS).text())
                .isEqualTo("100 agree, 1 refused (1 not read), 1 reset, 1 abandoned (1 not read), "
                        + "1 read after they were given up, 1 not of this play");
        assertThat(verdict.fit()).isTrue();
    }

    @Test
    void read_attemptReadThatNobodyMade_isUnfit() {
        Play play = sound().at(6 * S, to -> to.backendReceived(6 * S, FULMAR, 900, 1))
                .at(6 * S, to -> to.backendEnded(6 * S, FULMAR, 900, 1, true, 200));
        assertOnlyFails(play, ATTEMPTS, "1 read after they were given up");
    }

    @Test
    void read_interruptedPlay_isUnfitForThatAlone() {
        Play play = sound().at(6 * S, to -> to.requestDue(6 * S, 100, 0, 0, 0)).picked(6 * S, FULMAR, 700, 1);

        Verdict verdict = play.verdict(DRILL, 7 * S, false);

        assertThat(verdict.fit()).isFalse();
        assertThat(verdict.checks().stream().filter(each -> !each.ok()).map(SelfCheck::check))
                .containsExactly("played to its end");
        assertThat(check(verdict, "requests add up").text())
                .endsWith("each once; 1 was open when the play was interrupted");
    }

    @Test
    void read_connectionsPassedOn_areNotMatchedButTheirTimesAre() {
        // Two connections to skua, numbered from -1 down; one is still open at the end. The backend tells of the
        // requests
        // in them, under the numbers of the client. 2 s and 4 s in flight, on both sides of Little's law.
        Drill drill = new TestDrill().cargoByConnection().build();
        Play play = sound().picked(S, SKUA, -1, 1)
                .at(S, to -> to.backendReceived(S, SKUA, 900, 1))
                .at(S + MS, to -> to.backendEnded(S + MS, SKUA, 900, 1, true, 200))
                .ended(3 * S, SKUA, -1, 1, Outcome.RESET, 0)
                .picked(6 * S, SKUA, -2, 1);

        Verdict verdict = play.verdict(drill);

        assertThat(verdict.checks()).allMatch(SelfCheck::ok);
        assertThat(check(verdict, ATTEMPTS).text())
                .isEqualTo("100 agree, 2 were connections, which the balancer alone counts");
    }

    @Test
    void read_connectionEndedTwice_isUnfit() {
        Drill drill = new TestDrill().cargoByConnection().build();
        Play play = sound().picked(S, SKUA, -1, 1)
                .ended(2 * S, SKUA, -1, 1, Outcome.ANSWERED, 0)
                .at(3 * S, to -> to.attemptEnded(3 * S, SKUA, -1, 1, Outcome.ANSWERED, 0, 0));

        assertThat(check(play.verdict(drill), ATTEMPTS).ok()).isFalse();
    }
}
