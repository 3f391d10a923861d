package steelyard.balancer.live.tcp;

import io.netty.bootstrap.Bootstrap;
import io.netty.bootstrap.ServerBootstrap;
import io.netty.channel.Channel;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.ChannelOption;
import io.netty.channel.EventLoop;
import java.io.IOException;
import java.net.InetSocketAddress;
import java.util.HashMap;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.concurrent.atomic.AtomicLong;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.guard.WaitingRooms;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.live.tls.FrontTls;
import steelyard.balancer.settings.PoolSettings;

/**
 * The fronts of pools whose unit of work is a connection, passed through as it is. Methods may be called from any thread
 * but a loop's own.
 */
public final class TcpFronts {
    private final GuardedDecider decider;
    private final Transport transport;
    private final WaitingRooms rooms;
    private final List<InetSocketAddress> addresses;
    private final AtomicLong numbers;
    private final Fronts fronts = new Fronts();
    private final Map<EventLoop, Set<Passage>> passages = new HashMap<>();

    /**
     * @param addresses by backend number
     * @param numbers counted down for each connection
     */
    public TcpFronts(
            GuardedDecider decider,
            Transport transport,
            WaitingRooms rooms,
            List<InetSocketAddress> addresses,
            AtomicLong numbers) {
        this.decider = decider;
        this.transport = transport;
        this.rooms = rooms;
        this.addresses = List.copyOf(addresses);
        this.numbers = numbers;
        transport.loops().forEach(loop -> passages.put(loop, new HashSet<>()));
    }

    /**
     * Binds the front of a pool to a loopback port. Connections wait there until {@link #begin}.
     *
     * @param port 0 for any that is free
     * @throws IOException when the port cannot be had
     */
    public InetSocketAddress bind(
            int pool, PoolSettings settings, @Nullable FrontTls tls, @Nullable BackendTls backendTls, int port)
            throws IOException {
        TcpPool front = new TcpPool(pool, settings, decider, addresses, numbers, tls, backendTls);
        ServerBootstrap server = transport
                .server()
                .childOption(ChannelOption.AUTO_READ, tls != null) // a handshake is read, octets wait for a backend
                .childHandler(new Accepting(front));
        return fronts.bind(server, port);
    }

    /** From now on the fronts take connections. */
    public void begin() {
        fronts.begin();
    }

    /** Ends every connection on a backend; returns before it is done. */
    public void cut(int backend) {
        passages.forEach((loop, there) -> loop.execute(() -> List.copyOf(there).stream()
                .filter(passage -> passage.backend() == backend)
                .forEach(Passage::cut)));
    }

    /** Closes the fronts and the client connections, and waits for both; those to backends close a moment later. */
    public void close() {
        fronts.close();
    }

    private final class Accepting extends ChannelInitializer<Channel> {
        private final TcpPool pool;

        Accepting(TcpPool pool) {
            this.pool = pool;
        }

        @Override
        protected void initChannel(Channel channel) {
            EventLoop loop = channel.eventLoop();
            Set<Passage> there = passages.get(loop);
            if (there == null) {
                throw new IllegalStateException("a loop of another balancer");
            }
            fronts.came(channel);
            Bootstrap toBackends = transport
                    .client(loop)
                    .option(ChannelOption.AUTO_READ, pool.backendTls() != null)
                    .option(ChannelOption.ALLOW_HALF_CLOSURE, true)
                    .option(ChannelOption.CONNECT_TIMEOUT_MILLIS, pool.connectMillis());
            FrontTls tls = pool.tls();
            if (tls != null) {
                channel.pipeline().addLast(tls.handler(channel));
            }
            channel.pipeline().addLast(new Passage(pool, toBackends, rooms.of(loop), there, channel));
        }
    }
}
