package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.stage.virtual.Witness.HOP;
import static steelyard.harness.stage.virtual.Witness.MILLI;

import org.junit.jupiter.api.Test;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Cause;

/** Requests that go over to another protocol: in flight until their tunnel is closed at both ends. */
class TunnelsTest {
    private static final String POOL =
            "method: round-robin, drain: {limit: 100ms}, serves: {workers: 8, time: 1ms}, backends: {fulmar: , gannet: }";
    private static final String TRAFFIC =
            "rate: 2/s, clients: 1, give-up: 200ms, requests: [{get: /bridge, upgrade: websocket, open: 400ms}]";

    // On new connections all the way the 101 is there after 8 hops and 1 ms of work. The client closes 400 ms later;
    // the
    // balancer is done when the backend has closed too, 3 hops on, and the client a hop after that. The limit of its
    // patience is for the 101.
    @Test
    void tunnel_staysInFlightUntilItIsClosed() {
        Witness told = Witness.of(POOL, TRAFFIC, "1s", "");
        long closed = 250 * MILLI + MILLI + 8 * HOP + 400 * MILLI;
        assertThat(told.overs.get(0)).isEqualTo(new Witness.Over(closed + 3 * HOP, 0, 0, Outcome.ANSWERED, 101));
        assertThat(told.ends).hasSize(2).allMatch(each -> each.cause() == null && each.status() == 101);
        assertThat(told.ends.get(0).atNanos()).isEqualTo(closed + 4 * HOP);
    }

    // Its end is 400 ms later, but what its client waited for is the 101.
    @Test
    void latency_isThatOfThe101() {
        assertThat(Witness.measured(POOL, TRAFFIC, "1s", "{measure: latency, quantile: mean, at-most: 1s}"))
                .isEqualTo("1.4 ms");
        assertThat(Witness.of(POOL, TRAFFIC, "1s", "").opened.get(0)).isEqualTo(250 * MILLI + MILLI + 8 * HOP);
    }

    @Test
    void kill_resetsTheTunnel() {
        Witness told = Witness.of(POOL, TRAFFIC, "1s", "{at: 500ms, kill: fulmar}");
        assertThat(told.overs.get(0)).isEqualTo(new Witness.Over(500 * MILLI + HOP, 0, 0, Outcome.BROKEN, 101));
        assertThat(told.ends.get(0).cause()).isEqualTo(Cause.RESET);
        assertThat(told.ends.get(0).atNanos()).isEqualTo(500 * MILLI + 2 * HOP);
    }

    @Test
    void drain_atItsLimit_cutsTheTunnel() {
        Witness told = Witness.of(POOL, TRAFFIC, "1s", "{at: 500ms, drain: fulmar}");
        assertThat(told.overs.get(0)).isEqualTo(new Witness.Over(600 * MILLI, 0, 0, Outcome.CUT, 101));
        assertThat(told.ends.get(0).cause()).isEqualTo(Cause.CUT);
    }

    @Test
    void backendThatFails_opensNoTunnel() {
        Witness told = Witness.of(POOL, TRAFFIC, "1s", "{at: 0s, fail: {pool: seats}, status: 503}");
        assertThat(told.ends).hasSize(2).allMatch(each -> each.cause() == Cause.BACKEND_ERROR && each.status() == 503);
        assertThat(told.overs).allMatch(each -> each.outcome() == Outcome.ANSWERED && each.status() == 503);
    }

    @Test
    void client_thatGivesUpBeforeThe101_isGone() {
        Witness told = Witness.of(POOL.replace("time: 1ms", "time: 300ms"), TRAFFIC, "1s", "");
        assertThat(told.ends).hasSize(2).allMatch(each -> each.cause() == Cause.GAVE_UP);
        assertThat(told.overs).hasSize(2).allMatch(each -> each.outcome() == Outcome.ABANDONED);
    }
}
