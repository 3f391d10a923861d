package steelyard.balancer.live.http;

import io.netty.bootstrap.Bootstrap;
import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.channel.ChannelFuture;
import io.netty.channel.embedded.EmbeddedChannel;
import io.netty.util.concurrent.GlobalEventExecutor;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.atomic.AtomicLong;
import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.core.decide.Orders;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.guard.WaitingRoom;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;

/** One client connection with the real handlers of both sides and no sockets; backends take all and answer when told. */
final class EmbeddedBalancer {
    private static final PoolSettings POOL = PoolSettings.named(
                    "terns", PickSettings.of(PoolSettings.Method.ROUND_ROBIN))
            .of(List.of(new BackendSettings("tern-1", 1, 0, false)));
    private static final BalancerSettings SETTINGS =
            new BalancerSettings("steelyard", 1, List.of(new HostSettings("quay-1", 1)), List.of(POOL));
    private static final byte[] OK = "HTTP/1.1 200 OK\r\nContent-Length: 0\r\n\r\n".getBytes(StandardCharsets.US_ASCII);

    private final GuardedDecider decider = new GuardedDecider(
            SETTINGS, () -> 0, (draw, a, b) -> 0, new DecisionSink() {}, GlobalEventExecutor.INSTANCE, new NoOrders());
    private final PoolFront front;
    private final LoopConnections connections;
    private final List<Backend> backends = new ArrayList<>();

    private EmbeddedChannel client;
    private StringBuilder answers = new StringBuilder();

    EmbeddedBalancer() {
        decider.begin(0);
        front = PoolFront.of(0, POOL, decider, new RequestNumbers(new AtomicLong()), "steelyard");
        InetSocketAddress nowhere = new InetSocketAddress(InetAddress.getLoopbackAddress(), 1);
        connections = new LoopConnections(
                new Opening(), new WaitingRoom(0, 1), List.of(POOL), List.of(nowhere), pool -> null);
        client = opened();
    }

    private EmbeddedChannel opened() {
        ClientEncoder encoder = new ClientEncoder();
        RequestDecoder decoder = Codecs.requests(POOL.limits());
        EmbeddedChannel channel = new EmbeddedChannel();
        channel.pipeline().addLast(decoder, encoder, new ClientHandler(front, connections, decoder, encoder, channel));
        return channel;
    }

    /** What the backends got since the last new client, connection by connection. */
    List<String> sent() {
        return backends.stream().map(backend -> backend.got.toString()).toList();
    }

    /** What the client got since the last new client. */
    String answers() {
        return answers.toString();
    }

    boolean clientOpen() {
        return client.isOpen();
    }

    /** Octets from the client. */
    void send(byte[] octets, int from, int to) {
        if (client.isOpen()) {
            client.writeInbound(Unpooled.copiedBuffer(octets, from, to - from));
            drain();
        }
    }

    /** Answers the requests that are whole at the backends, until no more come. */
    void answerAll() {
        boolean more = true;
        while (more) {
            more = false;
            for (Backend backend : List.copyOf(backends)) {
                int whole =
                        StrictRequest.read(backend.got.toString()).requests().size();
                while (backend.answered < whole && backend.channel.isOpen()) {
                    backend.answered++;
                    backend.channel.writeInbound(Unpooled.wrappedBuffer(OK));
                    more = true;
                }
            }
            drain();
        }
    }

    private void drain() {
        for (ByteBuf part = client.readOutbound(); part != null; part = client.readOutbound()) {
            answers.append(part.toString(StandardCharsets.ISO_8859_1));
            part.release();
        }
        backends.forEach(Backend::drain);
    }

    /** Ends the client's connection, and what hung on it, and opens the next one. */
    void next() {
        client.finishAndReleaseAll();
        client.checkException();
        drainBackends();
        answers = new StringBuilder();
        client = opened();
    }

    private void drainBackends() {
        for (Backend backend : List.copyOf(backends)) {
            backend.drain();
            backend.channel.finishAndReleaseAll();
            backend.channel.checkException();
        }
        backends.clear();
    }

    /** Forgets what was sent and answered so far on connections that go on. */
    void forget() {
        answers.setLength(0);
        backends.forEach(backend -> {
            backend.got.setLength(0);
            backend.answered = 0;
        });
        backends.removeIf(backend -> !backend.channel.isOpen());
    }

    /** Ends everything; attempts in flight by the decider's count must be none. */
    int close() {
        client.finishAndReleaseAll();
        drainBackends();
        int[] left = new int[1];
        decider.change((core, now) -> left[0] = core.inFlight(0));
        decider.end();
        return left[0];
    }

    private static final class Backend {
        private final EmbeddedChannel channel;
        private final StringBuilder got = new StringBuilder();
        private int answered;

        Backend(EmbeddedChannel channel) {
            this.channel = channel;
        }

        void drain() {
            for (ByteBuf part = channel.readOutbound(); part != null; part = channel.readOutbound()) {
                got.append(part.toString(StandardCharsets.ISO_8859_1));
                part.release();
            }
        }
    }

    /** Opens channels without sockets; each stands at once. */
    private final class Opening extends Bootstrap {
        @Override
        public Bootstrap clone() {
            return new Opening();
        }

        @Override
        public ChannelFuture connect() {
            EmbeddedChannel channel = new EmbeddedChannel(config().handler());
            backends.add(new Backend(channel));
            return channel.newSucceededFuture();
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
}
