package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayDeque;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Tee;
import steelyard.harness.stage.CannotPlay;

/** Timing on the wire, the connection cap and clients that give up early, worked out by hand. */
class VirtualStageTest {
    private static final long MICRO = 1_000;

    /** What was told that these tests look at. */
    private static final class Account implements PlayListener {
        long firstTookNanos = -1;
        long lastTookNanos;
        int good;
        int gaveUp;
        int capHits;

        @Override
        public void connectionCapHit(long atNanos) {
            capHits++;
        }

        @Override
        public void requestEnded(
                long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
            lastTookNanos = atNanos - dueNanos;
            firstTookNanos = firstTookNanos < 0 ? lastTookNanos : firstTookNanos;
            good += cause == null ? 1 : 0;
            gaveUp += cause == Cause.GAVE_UP ? 1 : 0;
        }
    }

    // The first request needs two new connections: 3 hops to the balancer, 1 to ask the backend and 2 to reach it.
    // Later
    // ones need none: 2 hops there. All take 2 hops back and 1 ms of work.
    @Test
    void latency_onNewAndOnKeptConnections_countsTheHops() {
        Account told = play("rate: 10/s, clients: 1, give-up: 2s", "connections: 10", "1ms", "1s");
        assertThat(told.good).isEqualTo(10);
        assertThat(told.firstTookNanos).isEqualTo(1_000 * MICRO + 8 * 50 * MICRO);
        assertThat(told.lastTookNanos).isEqualTo(1_000 * MICRO + 4 * 50 * MICRO);
    }

    // Ten requests a second take 1.5 s each, so their client needs 15 or 16 connections at once.
    @Test
    void connectionCap_ofTheDrill_isHitOnlyWhereItIsTooLow() {
        assertThat(play("rate: 10/s, clients: 1, give-up: 5s", "connections: 16", "1500ms", "4s").capHits)
                .isZero();
        Account capped = play("rate: 10/s, clients: 1, give-up: 5s", "connections: 12", "1500ms", "4s");
        assertThat(capped.capHits).isPositive();
        assertThat(capped.gaveUp).isEqualTo(capped.capHits);
    }

    // A new connection takes 150 us to bring the request; its client is gone after 60, and the balancer knows it 50
    // later.
    @Test
    void giveUp_beforeTheRequestReachesTheBalancer_leavesNothingBehind() {
        Account told = play("rate: 1000/s, clients: 3, give-up: 60us", "connections: 10", "1ms", "1s");
        assertThat(told.gaveUp).isEqualTo(1_000);
        assertThat(told.capHits).isZero();
    }

    private static Account play(String traffic, String cap, String time, String lasts) {
        Drill drill = DrillReader.read("drill", """
                drill: Wire
                about: Even arrivals, one backend.
                stage:
                  %s
                  pools:
                    seats: {method: round-robin, serves: {workers: 64, time: %s}, backends: {fulmar: }}
                traffic: [{to: seats, arrivals: even, %s}]
                lasts: %s
                """.formatted(cap, time, traffic, lasts))
                .value()
                .orElseThrow();
        Account account = new Account();
        Judge judge = new Judge(drill, new Cast(drill));
        try (VirtualStage stage = new VirtualStage(drill, 1, new Transport(50 * MICRO))) {
            stage.open(new Tee(judge, account));
            stage.play(new Conductor(drill, new Chance(1), new ArrayDeque<>()));
        } catch (CannotPlay e) {
            throw new AssertionError(e);
        }
        assertThat(judge.verdict().checks())
                .filteredOn(each -> !each.check().equals("connection cap"))
                .allMatch(each -> each.ok());
        return account;
    }
}
