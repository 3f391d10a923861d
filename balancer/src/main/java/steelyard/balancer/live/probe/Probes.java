package steelyard.balancer.live.probe;

import io.netty.bootstrap.Bootstrap;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelHandler;
import io.netty.channel.ChannelInboundHandlerAdapter;
import java.net.InetSocketAddress;
import java.util.ArrayList;
import java.util.List;
import java.util.function.IntFunction;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.tcp.Transport;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;

/**
 * Starts and drops probes.
 *
 * <p>Each probe opens a connection of its own and closes it after the answer: a kept one would go on answering on a
 * backend that accepts no new connection. A TCP probe is good once its connection stands; an HTTP probe when the head
 * of an answer of 200 to 299 is in. All methods are called on the home loop.
 */
public final class Probes {
    private final GuardedDecider decider;
    private final Bootstrap client;
    private final List<Lane> lanes = new ArrayList<>();
    private boolean closed;

    /**
     * @param addresses by backend number
     * @param tls by pool number; null for a pool without it
     */
    public Probes(
            BalancerSettings settings,
            GuardedDecider decider,
            Transport transport,
            List<InetSocketAddress> addresses,
            IntFunction<@Nullable BackendTls> tls) {
        this.decider = decider;
        this.client = transport.client(transport.home());
        for (int pool = 0; pool < settings.pools().size(); pool++) {
            PoolSettings of = settings.pools().get(pool);
            for (int i = 0; i < of.backends().size(); i++) {
                lanes.add(new Lane(addresses.get(lanes.size()), of.probe(), tls.apply(pool)));
            }
        }
    }

    /** Starts probe number {@code probe} of a backend. */
    public void start(int backend, long probe) {
        Lane lane = lanes.get(backend);
        ProbeSettings settings = lane.settings;
        if (closed || settings == null) {
            return;
        }
        Probe started = new Probe(backend, probe);
        lane.running = started;
        String path = settings.path();
        ChannelHandler handler = path == null
                ? new ChannelInboundHandlerAdapter()
                : new HttpProbe(path, lane.address, lane.tls, started);
        ChannelFuture connecting = client.clone().handler(handler).connect(lane.address);
        started.channel = connecting.channel();
        connecting.addListener(done -> {
            if (!done.isSuccess()) {
                started.answered(false);
            } else if (path == null) {
                started.answered(true);
            }
        });
    }

    /** Stops waiting for a probe. */
    public void drop(int backend, long probe) {
        Probe running = lanes.get(backend).running;
        if (running != null && running.number == probe) {
            running.drop();
        }
    }

    /** Drops every probe; none starts any more. */
    public void close() {
        closed = true;
        for (Lane lane : lanes) {
            if (lane.running != null) {
                lane.running.drop();
            }
        }
    }

    /** Where a backend is probed, and the probe that runs there: never two at once. */
    private static final class Lane {
        private final InetSocketAddress address;
        private final @Nullable ProbeSettings settings;
        private final @Nullable BackendTls tls;
        private @Nullable Probe running;

        Lane(InetSocketAddress address, @Nullable ProbeSettings settings, @Nullable BackendTls tls) {
            this.address = address;
            this.settings = settings;
            this.tls = tls;
        }
    }

    /** One probe, answered at most once. */
    final class Probe {
        private final int backend;
        private final long number;
        private @Nullable Channel channel;
        private boolean over;

        private Probe(int backend, long number) {
            this.backend = backend;
            this.number = number;
        }

        long number() {
            return number;
        }

        void answered(boolean good) {
            if (!over) {
                drop();
                decider.probeAnswered(backend, number, good);
            }
        }

        private void drop() {
            over = true;
            if (lanes.get(backend).running == this) {
                lanes.get(backend).running = null;
            }
            if (channel != null) {
                channel.close();
            }
        }
    }
}
