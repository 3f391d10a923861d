package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.stage.virtual.Witness.HOP;
import static steelyard.harness.stage.virtual.Witness.MILLI;

import org.junit.jupiter.api.Test;

/** What handshakes cost. */
class TlsHopsTest {
    // TLS adds a way there and back to each new connection: 5 hops to the balancer instead of 3, and to the backend 1
    // to ask
    // for a connection, 1 back, 2 for the handshake and 1 for the request. A kept connection costs nothing more.
    @Test
    void tls_onBothSides_isOneMoreWayThereAndBackForEachNewConnection() {
        Witness told = Witness.of(
                "method: round-robin, front: {tls: true}, backend-tls: true, serves: {workers: 8, time: 1ms},"
                        + " backends: {fulmar: }",
                "rate: 10/s, clients: 1, give-up: 2s",
                "1s",
                "");
        assertThat(told.ends.get(0).tookNanos()).isEqualTo(MILLI + (5 + 5 + 2) * HOP);
        assertThat(told.ends.get(9).tookNanos()).isEqualTo(MILLI + 4 * HOP);
    }
}
