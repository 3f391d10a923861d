package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.EventLoop;
import java.io.IOException;
import java.net.InetSocketAddress;
import java.security.SecureRandom;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.concurrent.atomic.AtomicLong;
import java.util.function.Consumer;
import java.util.function.IntFunction;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.guard.WaitingRooms;
import steelyard.balancer.live.tcp.Fronts;
import steelyard.balancer.live.tcp.Transport;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.live.tls.FrontTls;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.PoolSettings;

/** The fronts of all pools and the connections behind them. Methods may be called from any thread but a loop's own. */
public final class Forwarding {
    private static final int SECRET_BYTES = 32;

    private final BalancerSettings settings;
    private final GuardedDecider decider;
    private final Transport transport;
    private final RequestNumbers numbers;
    private final byte[] secret = new byte[SECRET_BYTES];
    private final Fronts fronts = new Fronts();
    private final Map<EventLoop, LoopConnections> connections = new HashMap<>();

    /**
     * @param addresses by backend number
     * @param tls towards backends, by pool number; null for a pool without it
     * @param own counted down for each request without a number
     */
    public Forwarding(
            BalancerSettings settings,
            GuardedDecider decider,
            Transport transport,
            WaitingRooms rooms,
            List<InetSocketAddress> addresses,
            IntFunction<@Nullable BackendTls> tls,
            AtomicLong own) {
        this.settings = settings;
        this.decider = decider;
        this.transport = transport;
        new SecureRandom().nextBytes(secret);
        this.numbers = new RequestNumbers(own);
        for (EventLoop loop : transport.loops()) {
            connections.put(
                    loop,
                    new LoopConnections(transport.client(loop), rooms.of(loop), settings.pools(), addresses, tls));
        }
    }

    /**
     * Binds the front of a pool to a loopback port. Connections wait there until {@link #begin}.
     *
     * @param tls towards clients, or null for none
     * @param port 0 for any that is free
     * @throws IOException when the port cannot be had
     */
    public InetSocketAddress bind(int pool, @Nullable FrontTls tls, int port) throws IOException {
        PoolSettings of = settings.pools().get(pool);
        PoolFront front = PoolFront.of(pool, of, decider, numbers, settings.name())
                .with(Berths.of(of, settings.firstBackend(pool), secret));
        return fronts.bind(transport.server().childHandler(new ClientInitializer(front, tls)), port);
    }

    /** From now on the fronts answer. */
    public void begin() {
        fronts.begin();
    }

    /** Ends every attempt in flight on a backend; returns before it is done. */
    public void cut(int backend) {
        onEveryLoop(there -> there.cut(backend));
    }

    /**
     * Closes the fronts and the client connections, and waits for both; those to backends close on their loops a moment
     * later.
     */
    public void close() {
        fronts.close();
        onEveryLoop(LoopConnections::closeAll);
    }

    private void onEveryLoop(Consumer<LoopConnections> what) {
        connections.forEach((loop, there) -> loop.execute(() -> what.accept(there)));
    }

    private final class ClientInitializer extends ChannelInitializer<Channel> {
        private final PoolFront front;
        private final @Nullable FrontTls tls;

        ClientInitializer(PoolFront front, @Nullable FrontTls tls) {
            this.front = front;
            this.tls = tls;
        }

        @Override
        protected void initChannel(Channel channel) {
            LoopConnections there = connections.get(channel.eventLoop());
            if (there == null) {
                throw new IllegalStateException("a loop of another balancer");
            }
            fronts.came(channel);
            if (tls != null) {
                channel.pipeline().addLast(tls.handler(channel));
            }
            RequestDecoder decoder = Codecs.requests(front.settings().limits());
            ClientEncoder encoder = new ClientEncoder();
            channel.pipeline().addLast(decoder, encoder, new ClientHandler(front, there, decoder, encoder, channel));
        }
    }
}
