package steelyard.balancer.live.http;

import static org.assertj.core.api.Assertions.assertThat;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.channel.embedded.EmbeddedChannel;
import io.netty.util.concurrent.GlobalEventExecutor;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.concurrent.atomic.AtomicLong;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.core.decide.Orders;
import steelyard.balancer.live.Leaks;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.guard.WaitingRoom;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;

/**
 * Requests that are answered here, without sockets: there is nothing behind the handler that could be picked or
 * connected to, so a request that slipped through would fail the test. Each is sent whole and octet by octet.
 */
class RefusalsTest {
    static {
        Leaks.watch();
    }

    private static final long SECOND = 1_000_000_000L;
    private static final PoolSettings POOL = PoolSettings.named(
                    "terns", PickSettings.of(PoolSettings.Method.ROUND_ROBIN))
            .of(List.of(new BackendSettings("tern-1", 1, 0, false)));

    private int picked;

    private final class Sink implements DecisionSink {
        @Override
        public void picked(long nowNanos, int pool, int backend, long request, int attempt, int inFlight) {
            picked++;
        }
    }

    private static final class NoOrders implements Orders {
        @Override
        public void startProbe(int backend, long probe) {}

        @Override
        public void dropProbe(int backend, long probe) {}

        @Override
        public void startReading(int backend, long number) {}

        @Override
        public void dropReading(int backend, long number) {}

        @Override
        public void place(long ticket, int backend) {}

        @Override
        public void cut(int backend) {}
    }

    private EmbeddedChannel channel() {
        BalancerSettings settings =
                new BalancerSettings("steelyard", 1, List.of(new HostSettings("quay-1", 1)), List.of(POOL));
        GuardedDecider decider = new GuardedDecider(
                settings, () -> 0, (draw, a, b) -> 0, new Sink(), GlobalEventExecutor.INSTANCE, new NoOrders());
        decider.begin(0);
        decider.change((core, now) -> core.withdraw(0, now));
        PoolFront front = PoolFront.of(0, POOL, decider, new RequestNumbers(new AtomicLong()), "steelyard");
        EmbeddedChannel channel = new EmbeddedChannel();
        ClientEncoder encoder = new ClientEncoder();
        LoopConnections none = new LoopConnections(
                new io.netty.bootstrap.Bootstrap(), new WaitingRoom(0, 1), List.of(), List.of(), pool -> null);
        RequestDecoder decoder = Codecs.requests(POOL.limits());
        channel.pipeline().addLast(decoder, encoder, new ClientHandler(front, none, decoder, encoder, channel));
        return channel;
    }

    /** What comes back for these octets, and whether the connection closed. */
    private record Reply(String text, boolean closed) {}

    private Reply ask(String request, int step) {
        EmbeddedChannel channel = channel();
        byte[] octets = request.getBytes(StandardCharsets.ISO_8859_1);
        for (int from = 0; from < octets.length && channel.isOpen(); from += step) {
            channel.writeInbound(Unpooled.copiedBuffer(octets, from, Math.min(step, octets.length - from)));
        }
        StringBuilder text = new StringBuilder();
        for (ByteBuf part = channel.readOutbound(); part != null; part = channel.readOutbound()) {
            text.append(part.toString(StandardCharsets.ISO_8859_1));
            part.release();
        }
        boolean closed = !channel.isOpen();
        channel.finishAndReleaseAll();
        return new Reply(text.toString(), closed);
    }

    private void assertRefused(String request, int status) {
        for (int step : new int[] {request.length(), 1}) {
            Reply reply = ask(request, step);
            assertThat(reply.text()).as("in steps of %d: %s", step, request).startsWith("HTTP/1.1 " + status + " ");
            assertThat(reply.text().split("HTTP/1.1 "))
                    .as("answers to %s", request)
                    .hasSize(2);
            assertThat(reply.closed()).as("closed after %s", request).isTrue();
        }
    }

    @AfterEach
    void nothingWasPickedAndNothingLeaks() {
        assertThat(picked).isZero();
        Leaks.check();
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "GET / HTTP/1.1\r\n\r\n",
                "GET / HTTP/1.1\r\nHost: a\r\nHost: a\r\n\r\n",
                "GET / HTTP/1.1\r\nHost: a b\r\n\r\n",
                "GET / HTTP/1.1\r\nHost: a/b\r\n\r\n",
                "GET / HTTP/1.1\r\nHost: user@a\r\n\r\n",
            })
    void host_missingDoubledOrInvalid_is400(String request) {
        assertRefused(request + "GET / HTTP/1.1\r\nHost: a\r\n\r\n", 400);
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "Content-Length: 4\r\nTransfer-Encoding: chunked",
                "Transfer-Encoding: chunked, gzip",
                "Transfer-Encoding: chunked, identity",
                "Transfer-Encoding: gzip, chunked",
                "Transfer-Encoding: xchunked",
                "Transfer-Encoding: chunked\r\nTransfer-Encoding: chunked",
                "Content-Length: +5",
                "Content-Length: -1",
                "Content-Length: 0x5",
                "Content-Length: 5 5",
                "Content-Length:",
                "Content-Length: 5a",
                "Content-Length: 5,6",
                "Content-Length: 5\r\nContent-Length: 6",
                "Content-Length: 18446744073709551621",
                "Connection: Host, Content-Length\r\nContent-Length: 5",
                "Content-Length : 5",
            })
    void length_unclear_is400(String fields) {
        assertRefused(
                "POST / HTTP/1.1\r\nHost: a\r\n" + fields + "\r\n\r\nhelloGET / HTTP/1.1\r\nHost: a\r\n\r\n", 400);
    }

    @Test
    void length_oldClientSendsChunks_is400() {
        assertRefused("POST / HTTP/1.0\r\nHost: a\r\nTransfer-Encoding: chunked\r\n\r\n0\r\n\r\n", 400);
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "HELO x\r\n\r\n",
                "GET / HTTP/1.1\r\nHost: a\r\nX: a\0b\r\n\r\n",
                "GET ftp://a/ HTTP/1.1\r\nHost: a\r\n\r\n",
                "GET * HTTP/1.1\r\nHost: a\r\n\r\n",
                "GET /a b HTTP/1.1\r\nHost: a\r\n\r\n",
                "GET / http/1.1\r\nHost: a\r\n\r\n",
                "GET / HTTP/1.1\r\nHost: a\r\nX: a\rb\r\n\r\n",
                "OPTIONS / HTTP/1.1\r\nHost: a\r\nMax-Forwards: x\r\n\r\n",
            })
    void head_faulty_is400(String request) {
        assertRefused(request, 400);
    }

    @Test
    void head_tooLarge_is414Or431() {
        assertRefused("GET /" + "x".repeat(9000) + " HTTP/1.1\r\nHost: a\r\n\r\n", 414);
        assertRefused("GET / HTTP/1.1\r\nHost: a\r\nX: " + "x".repeat(100_000) + "\r\n\r\n", 431);
    }

    @Test
    void head_otherVersionOrTunnel_isRefused() {
        assertRefused("GET / HTTP/2.0\r\nHost: a\r\n\r\n", 505);
        assertRefused("CONNECT a.example:80 HTTP/1.1\r\nHost: a.example:80\r\n\r\n", 501);
    }

    @Test
    void maxForwards_zero_isAnsweredHereAndConnectionStays() {
        Reply options = ask("OPTIONS / HTTP/1.1\r\nHost: a\r\nMax-Forwards: 0\r\n\r\n", 1);
        assertThat(options.text()).startsWith("HTTP/1.1 200 ").containsIgnoringCase("allow: ");
        assertThat(options.closed()).isFalse();
        Reply trace = ask("TRACE / HTTP/1.1\r\nHost: a\r\nCookie: secret\r\nMax-Forwards: 0\r\n\r\n", 1);
        assertThat(trace.text()).startsWith("HTTP/1.1 405 ").doesNotContain("secret");
    }

    @Test
    void nobody_pipelinedRequests_eachGetAnAnswer() {
        String get = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";
        for (int step : new int[] {1, 7, 5000}) {
            assertThat(ask(get.repeat(50), step).text().split("HTTP/1.1 503 "))
                    .as("in steps of %d", step)
                    .hasSize(51);
        }
    }
}
