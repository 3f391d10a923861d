package steelyard.balancer.live.probe;

import io.netty.channel.ChannelInboundHandlerAdapter;
import java.net.InetSocketAddress;
import java.util.List;
import java.util.function.Consumer;
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
    private final Lanes<ProbeSettings> lanes;

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
        this.lanes = new Lanes<>(settings, transport, addresses, tls, PoolSettings::probe);
    }

    /** Starts probe number {@code probe} of a backend. */
    public void start(int backend, long probe) {
        Lane<ProbeSettings> lane = lanes.of(backend);
        ProbeSettings settings = lane.settings();
        if (lanes.closed() || settings == null) {
            return;
        }
        Question started = lane.begin(probe);
        Consumer<Boolean> answered = good -> {
            if (started.close()) {
                decider.probeAnswered(backend, probe, good);
            }
        };
        String path = settings.path();
        if (path == null) {
            started.connect(new ChannelInboundHandlerAdapter(), answered);
        } else {
            started.connect(new HttpProbe(path, lane, probe, answered), stands -> {
                if (!stands) {
                    answered.accept(false);
                }
            });
        }
    }

    /** Stops waiting for a probe. */
    public void drop(int backend, long probe) {
        lanes.drop(backend, probe);
    }

    /** Drops every probe; none starts any more. */
    public void close() {
        lanes.close();
    }
}
