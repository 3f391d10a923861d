package steelyard.balancer.live.http;

import io.netty.bootstrap.Bootstrap;
import io.netty.channel.ChannelOption;
import java.net.InetSocketAddress;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Set;
import java.util.concurrent.TimeUnit;
import java.util.function.IntFunction;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.live.guard.WaitingRoom;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.TimeoutSettings;

/** The connections of one event loop to all backends; idle ones are taken again last used first. Used on its loop only. */
final class LoopConnections {
    private final List<Lane> lanes = new ArrayList<>();
    private final WaitingRoom room;

    /**
     * @param client makes channels on this loop
     * @param room of this loop
     * @param addresses by backend number
     * @param tls by pool number; null for a pool without it
     */
    LoopConnections(
            Bootstrap client,
            WaitingRoom room,
            List<PoolSettings> pools,
            List<InetSocketAddress> addresses,
            IntFunction<@Nullable BackendTls> tls) {
        this.room = room;
        for (int pool = 0; pool < pools.size(); pool++) {
            PoolSettings of = pools.get(pool);
            for (int member = 0; member < of.backends().size(); member++) {
                lanes.add(new Lane(client, addresses.get(lanes.size()), of.timeouts(), tls.apply(pool)));
            }
        }
    }

    /** Where tries of this loop wait for a place. */
    WaitingRoom room() {
        return room;
    }

    /** An idle connection that is still open, or null. */
    @Nullable
    BackendConnection take(int backend) {
        ArrayDeque<BackendConnection> idle = lanes.get(backend).idle;
        BackendConnection connection = idle.pollLast();
        while (connection != null && !connection.open()) {
            connection = idle.pollLast();
        }
        return connection;
    }

    /**
     * Starts a new connection, which tells the exchange when it stands or does not come to stand.
     *
     * <p>Its socket is made in a task of its own. A retry connects just after a dead connection was closed, and the system
     * would give the new socket the number of the old one; what the loop had already been told of that number would then
     * be taken for news of the new one, and end it before it stands.
     */
    void connect(int backend, Exchange exchange) {
        Lane lane = lanes.get(backend);
        BackendConnection connection = new BackendConnection(this, backend, lane.timeouts, lane.tls, exchange);
        lane.all.add(connection);
        exchange.request().opening(connection);
        exchange.later(() -> open(lane, connection));
    }

    private void open(Lane lane, BackendConnection connection) {
        if (connection.served() == null) {
            closed(connection); // given up in the meantime
        } else {
            connection.opening(
                    lane.bootstrap.clone().handler(connection.initializer()).connect());
        }
    }

    void idle(BackendConnection connection) {
        lanes.get(connection.backend()).idle.addLast(connection);
    }

    void closed(BackendConnection connection) {
        Lane lane = lanes.get(connection.backend());
        lane.all.remove(connection);
        lane.idle.remove(connection);
    }

    /** Ends every attempt in flight on a backend. */
    void cut(int backend) {
        for (BackendConnection connection : List.copyOf(lanes.get(backend).all)) {
            connection.fail(Outcome.CUT, OwnAnswer.CUT);
        }
    }

    void closeAll() {
        for (Lane lane : lanes) {
            List.copyOf(lane.all).forEach(BackendConnection::close);
        }
    }

    /** Connections that are open or being opened. */
    int open() {
        return lanes.stream().mapToInt(lane -> lane.all.size()).sum();
    }

    /** One backend's connections. */
    private static final class Lane {
        private final Bootstrap bootstrap;
        private final TimeoutSettings timeouts;
        private final @Nullable BackendTls tls;
        private final ArrayDeque<BackendConnection> idle = new ArrayDeque<>();
        private final Set<BackendConnection> all = new HashSet<>();

        Lane(Bootstrap client, InetSocketAddress address, TimeoutSettings timeouts, @Nullable BackendTls tls) {
            long millis = TimeUnit.NANOSECONDS.toMillis(timeouts.connectNanos());
            this.bootstrap = client.clone().remoteAddress(address).option(ChannelOption.CONNECT_TIMEOUT_MILLIS, (int)
                    Math.max(1, Math.min(millis, Integer.MAX_VALUE)));
            this.timeouts = timeouts;
            this.tls = tls;
        }
    }
}
