package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.tuple;
import static steelyard.harness.stage.virtual.Witness.HOP;
import static steelyard.harness.stage.virtual.Witness.MILLI;

import org.junit.jupiter.api.Test;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Cause;

/** Connections that are passed through: who is picked when, and what their ends come to. */
class PassThroughTest {
    private static final String POOL = "method: round-robin, count: connections, front: {kind: tcp},"
            + " timeouts: {connect: 1s, first-byte: 10s, idle: 600ms}, serves: {workers: 8, time: 1ms},"
            + " backends: {fulmar: , gannet: }";

    // The wish to connect takes a hop and is given a backend there. The backend's end stands 2 hops later, just when
    // the
    // first request comes: it goes on without a stop, 4 hops there and 2 back. Later ones take 2 hops there.
    @Test
    void request_onAConnectionPassedThrough_countsTheHops() {
        Witness told = Witness.of(POOL, "rate: 10/s, clients: 1, give-up: 2s", "1s", "");
        assertThat(told.picks).singleElement().satisfies(pick -> {
            assertThat(pick.atNanos()).isEqualTo(50 * MILLI + HOP);
            assertThat(pick.request()).isEqualTo(-1);
        });
        assertThat(told.ends).hasSize(10).allMatch(each -> each.cause() == null && each.status() == 200);
        assertThat(told.ends.get(0).tookNanos()).isEqualTo(MILLI + 6 * HOP);
        assertThat(told.ends.get(9).tookNanos()).isEqualTo(MILLI + 4 * HOP);
        assertThat(told.received).isEqualTo(10);
        // At the end of the play its client closes it; the balancer knows a hop later, and the backend's end is 2 more.
        assertThat(told.overs).containsExactly(new Witness.Over(1_000 * MILLI + 3 * HOP, 0, -1, Outcome.ANSWERED, 0));
    }

    // A client closes what was idle for half the balancer's 600 ms. One request every 500 ms: each finds its connection
    // closed, which the balancer has known a hop after, and the backend's end of it 2 hops later.
    @Test
    void idleConnection_isClosedByItsClient_andEndsWell() {
        Witness told = Witness.of(POOL, "rate: 2/s, clients: 1, give-up: 2s", "2s", "");
        assertThat(told.backendsPicked()).containsExactly(0, 1, 0, 1);
        assertThat(told.picks).extracting(Witness.Pick::request).containsExactly(-1L, -2L, -3L, -4L);
        long firstAnswered = 250 * MILLI + MILLI + 6 * HOP;
        assertThat(told.overs.get(0))
                .isEqualTo(new Witness.Over(firstAnswered + 300 * MILLI + 3 * HOP, 0, -1, Outcome.ANSWERED, 0));
        assertThat(told.overs).allMatch(each -> each.outcome() == Outcome.ANSWERED);
    }

    // Both connections stand when fulmar dies; the one on it breaks, and its client makes another, to gannet in turn or
    // refused.
    @Test
    void kill_breaksTheConnectionsOnIt_andNoOthers() {
        Witness told = Witness.of(POOL, "rate: 40/s, clients: 2, give-up: 2s", "1s", "{at: 500ms, kill: fulmar}");
        assertThat(told.overs)
                .filteredOn(each -> each.outcome() == Outcome.BROKEN)
                .singleElement()
                .satisfies(each -> {
                    assertThat(each.backend()).isZero();
                    assertThat(each.atNanos()).isEqualTo(500 * MILLI + HOP);
                });
        assertThat(told.overs)
                .filteredOn(each -> each.backend() == 1)
                .allMatch(each -> each.outcome() == Outcome.ANSWERED && each.atNanos() > 1_000 * MILLI);
        assertThat(told.overs)
                .filteredOn(each -> each.outcome() == Outcome.REFUSED)
                .isNotEmpty()
                .allMatch(each -> each.backend() == 0);
        // A client whose connection is refused or broken sees it close, and no more.
        assertThat(told.count(null) + told.count(Cause.RESET)).isEqualTo(40);
        assertThat(told.count(Cause.RESET)).isPositive();
    }

    @Test
    void requestUnderWay_whenItsBackendDies_isReset() {
        Witness told = Witness.of(
                POOL.replace("time: 1ms", "time: 400ms"),
                "rate: 2/s, clients: 1, give-up: 2s",
                "1s",
                "{at: 400ms, kill: [fulmar, gannet]}");
        assertThat(told.ends)
                .extracting(Witness.End::request, Witness.End::cause, Witness.End::atNanos)
                .contains(tuple(0L, Cause.RESET, 400 * MILLI + 2 * HOP));
    }

    @Test
    void drain_atItsLimit_cutsConnections_idleOrNot() {
        Witness told = Witness.of(
                POOL, "rate: 40/s, clients: 2, give-up: 2s", "1s", "{at: 400ms, drain: fulmar, limit: 200ms}");
        assertThat(told.overs)
                .filteredOn(each -> each.outcome() == Outcome.CUT)
                .singleElement()
                .satisfies(each -> {
                    assertThat(each.backend()).isZero();
                    assertThat(each.atNanos()).isEqualTo(600 * MILLI);
                });
        // Who was on it connects anew, and is given gannet.
        assertThat(told.picks).filteredOn(each -> each.atNanos() > 600 * MILLI).allMatch(each -> each.backend() == 1);
    }

    // The backend is silent, so its client gives up after 300 ms; a closed connection is an orderly end. That of the
    // last
    // one is not waited for: the play is over when every request is.
    @Test
    void giveUp_closesTheConnection_andEndsWell() {
        Witness told =
                Witness.of(POOL, "rate: 10/s, clients: 1, give-up: 300ms", "1s", "{at: 0s, hang: [fulmar, gannet]}");
        assertThat(told.count(Cause.GAVE_UP)).isEqualTo(10);
        assertThat(told.overs).hasSize(10).allMatch(each -> each.outcome() == Outcome.ANSWERED);
        assertThat(told.overs.get(0).atNanos()).isEqualTo(350 * MILLI + 3 * HOP);
    }

    @Test
    void nobodyToPick_closesTheConnection() {
        Witness told =
                Witness.of(POOL, "rate: 10/s, clients: 1, give-up: 2s", "1s", "{at: 0s, withdraw: {pool: seats}}");
        assertThat(told.picks).isEmpty();
        assertThat(told.ends).hasSize(10).allMatch(each -> each.cause() == Cause.RESET && each.tookNanos() == 2 * HOP);
    }
}
