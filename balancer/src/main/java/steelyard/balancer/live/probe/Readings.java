package steelyard.balancer.live.probe;

import java.net.InetSocketAddress;
import java.util.List;
import java.util.function.Consumer;
import java.util.function.IntFunction;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.tcp.Transport;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.PoolSettings;

/**
 * Reads load pages, each on a connection of its own. A reading is good when the whole page of an answer of 200 to 299 is
 * in. All methods are called on the home loop.
 */
public final class Readings {
    private final GuardedDecider decider;
    private final Lanes<LoadSettings> lanes;

    /**
     * @param addresses by backend number
     * @param tls by pool number; null for a pool without it
     */
    public Readings(
            BalancerSettings settings,
            GuardedDecider decider,
            Transport transport,
            List<InetSocketAddress> addresses,
            IntFunction<@Nullable BackendTls> tls) {
        this.decider = decider;
        this.lanes = new Lanes<>(settings, transport, addresses, tls, PoolSettings::load);
    }

    /** Starts reading number {@code number} of a backend. */
    public void start(int backend, long number) {
        Lane<LoadSettings> lane = lanes.of(backend);
        LoadSettings settings = lane.settings();
        if (lanes.closed() || settings == null) {
            return;
        }
        Question started = lane.begin(number);
        Consumer<@Nullable String> read = page -> {
            if (started.close()) {
                double[] gauges = page == null ? null : LoadPage.read(page, settings.gauges());
                decider.read(backend, number, gauges);
            }
        };
        started.connect(new PageFetch(settings.path(), lane, read), stands -> {
            if (!stands) {
                read.accept(null);
            }
        });
    }

    /** Stops waiting for a reading. */
    public void drop(int backend, long number) {
        lanes.drop(backend, number);
    }

    /** Drops every reading; none starts any more. */
    public void close() {
        lanes.close();
    }
}
