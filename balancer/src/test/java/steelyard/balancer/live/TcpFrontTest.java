package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.awaitility.Awaitility.await;

import java.io.IOException;
import java.net.SocketException;
import java.time.Duration;
import java.util.Random;
import java.util.concurrent.atomic.AtomicBoolean;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.balancer.core.decide.Outcome;

/** Connections that are passed through as they are. */
@ExtendWith(Accounting.class)
class TcpFrontTest {
    private static final int MUCH = 1 << 20;

    private static byte[] octets(int many) {
        byte[] octets = new byte[many];
        new Random(7).nextBytes(octets);
        return octets;
    }

    private static FakeBackend echo() throws IOException {
        return FakeBackend.playing(wire -> {
            byte[] buffer = new byte[8192];
            int read = wire.skip(buffer);
            while (read > 0) {
                wire.send(java.util.Arrays.copyOf(buffer, read));
                read = wire.skip(buffer);
            }
        });
    }

    @Test
    void tcp_muchBothWays_arrivesAsItWas() throws Exception {
        byte[] sent = octets(MUCH);
        try (FakeBackend backend = echo();
                LivePlay play = LivePlay.of(Pool::passing, backend.address());
                Wire client = play.client()) {
            Thread writer = new Thread(() -> send(client, sent));
            writer.start();
            assertThat(client.readOctets(MUCH)).isEqualTo(sent);
            writer.join();
            client.finish();
            assertThat(client.readToEnd()).isEmpty();
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ANSWERED);
        }
    }

    private static void send(Wire wire, byte[] octets) {
        try {
            wire.send(octets);
        } catch (IOException e) {
            throw new IllegalStateException(e);
        }
    }

    @Test
    void tcp_connections_haveNumbersOfTheirOwnAndGoRound() throws Exception {
        try (FakeBackend one = echo();
                FakeBackend two = echo();
                LivePlay play = LivePlay.of(Pool::passing, one.address(), two.address())) {
            for (int i = 0; i < 4; i++) {
                try (Wire client = play.client()) {
                    client.send("x");
                    assertThat(client.read(1)).isEqualTo("x");
                    client.finish();
                    assertThat(client.readToEnd()).isEmpty();
                }
                play.settle();
            }
            assertThat(play.decisions.picks())
                    .containsExactly(
                            new Decisions.Pick(0, -1, 1),
                            new Decisions.Pick(1, -2, 1),
                            new Decisions.Pick(0, -3, 1),
                            new Decisions.Pick(1, -4, 1));
        }
    }

    @Test
    void tcp_clientHalfClosed_stillGetsWhatTheBackendSaysAfterwards() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> wire.send("got " + wire.readToEnd()));
                LivePlay play = LivePlay.of(Pool::passing, backend.address());
                Wire client = play.client()) {
            client.send("all");
            client.finish();
            assertThat(client.readToEnd()).isEqualTo("got all");
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ANSWERED);
        }
    }

    @Test
    void tcp_backendHalfClosed_stillGetsWhatTheClientSaysAfterwards() throws Exception {
        StringBuilder heard = new StringBuilder();
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.send("first");
                    wire.finish();
                    heard.append(wire.readToEnd());
                });
                LivePlay play = LivePlay.of(Pool::passing, backend.address());
                Wire client = play.client()) {
            assertThat(client.readToEnd()).isEqualTo("first");
            client.send("last");
            client.finish();
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ANSWERED);
        }
        assertThat(heard.toString()).isEqualTo("last");
    }

    @Test
    void tcp_backendWritesMuchAndCloses_clientReadsItAllThenTheEnd() throws Exception {
        byte[] sent = octets(MUCH);
        try (FakeBackend backend = FakeBackend.playing(wire -> wire.send(sent));
                LivePlay play = LivePlay.of(Pool::passing, backend.address());
                Wire client = play.client()) {
            assertThat(client.readOctets(MUCH)).isEqualTo(sent);
            assertThat(client.readToEnd()).isEmpty();
        }
    }

    @Test
    void tcp_backendResets_clientIsReset() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.read(1);
                    wire.send("y");
                    wire.read(1);
                    wire.reset();
                });
                LivePlay play = LivePlay.of(Pool::passing, backend.address());
                Wire client = play.client()) {
            client.send("x");
            assertThat(client.read(1)).isEqualTo("y");
            client.send("z");
            assertThatThrownBy(() -> client.read(1)).isInstanceOf(SocketException.class);
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.BROKEN);
        }
    }

    @Test
    void tcp_clientResets_backendIsReset() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.read(1);
                    wire.send("y");
                    wire.read(1);
                });
                LivePlay play = LivePlay.of(Pool::passing, backend.address())) {
            Wire client = play.client();
            client.send("x");
            client.read(1);
            client.reset();
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ABANDONED);
            await().until(() -> backend.failure() instanceof SocketException);
        }
    }

    @Test
    void tcp_backendRefuses_isTriedOnAnotherWhereTheDrillAsks() throws Exception {
        try (FakeBackend backend = echo();
                LivePlay play =
                        LivePlay.of(pool -> pool.passing().retrying(), FakeBackend.deadAddress(), backend.address());
                Wire client = play.client()) {
            client.send("x");
            assertThat(client.read(1)).isEqualTo("x");
            assertThat(play.decisions.picks())
                    .containsExactly(new Decisions.Pick(0, -1, 1), new Decisions.Pick(1, -1, 2));
        }
    }

    @Test
    void tcp_backendRefuses_closesTheClientWithoutRetry() throws Exception {
        try (FakeBackend backend = echo();
                LivePlay play = LivePlay.of(Pool::passing, FakeBackend.deadAddress(), backend.address());
                Wire client = play.client()) {
            assertThat(client.readToEnd()).isEmpty();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.REFUSED);
        }
    }

    @Test
    void tcp_nothingMoves_endsAtTheIdleLimit() throws Exception {
        try (FakeBackend backend = echo();
                LivePlay play = LivePlay.of(pool -> pool.passing().patience(5, 5, 0.2), backend.address());
                Wire client = play.client()) {
            client.send("x");
            assertThat(client.read(1)).isEqualTo("x");
            assertThatThrownBy(() -> client.read(1)).isInstanceOf(SocketException.class);
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.STALLED);
        }
    }

    @Test
    void tcp_drainLimit_cutsWhatIsLeft() throws Exception {
        try (FakeBackend backend = echo();
                LivePlay play = LivePlay.of(pool -> pool.passing().drainingWithin(0.2), backend.address());
                Wire client = play.client()) {
            client.send("x");
            assertThat(client.read(1)).isEqualTo("x");
            play.balancer.drain(0, 0);
            assertThatThrownBy(() -> client.read(1)).isInstanceOf(SocketException.class);
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.CUT);
            try (Wire late = play.client()) {
                assertThat(late.readToEnd()).isEmpty();
            }
            assertThat(play.decisions.nobody()).isEqualTo(1);
        }
    }

    @Test
    void tcp_clientTakesNothing_backendIsSlowedDown() throws Exception {
        byte[] sent = octets(16 * MUCH);
        AtomicBoolean allOut = new AtomicBoolean();
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.send(sent);
                    allOut.set(true);
                    wire.readToEnd(); // stays open until the client has read all
                });
                LivePlay play = LivePlay.of(Pool::passing, backend.address());
                Wire client = play.client()) {
            await().until(() -> play.inFlight() == 1);
            // Far longer than 16 MiB need on the loopback network.
            await().during(Duration.ofMillis(500)).until(() -> !allOut.get());
            assertThat(client.readOctets(sent.length)).isEqualTo(sent);
        }
    }
}
