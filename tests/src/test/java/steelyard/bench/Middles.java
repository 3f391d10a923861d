package steelyard.bench;

import java.net.InetSocketAddress;
import java.util.List;
import java.util.Set;
import java.util.stream.IntStream;
import steelyard.backends.behave.Chance;
import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.live.Balancer;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.RetrySettings;
import steelyard.balancer.settings.TimeoutSettings;
import steelyard.harness.stage.Draws;

/** Balancers as a drill would have them: a pool with a retry budget, and the decisions listened to. */
final class Middles {
    private static final long SECOND = 1_000_000_000L;

    private Middles() {}

    /** Weighted turns over three backends, all at one address. */
    static Balancer three(InetSocketAddress backend) throws Exception {
        return start(
                backend,
                PickSettings.of(PoolSettings.Method.WEIGHTED_ROUND_ROBIN),
                List.of(
                        new BackendSettings("fulmar", 1, 0, false),
                        new BackendSettings("gannet", 2, 0, false),
                        new BackendSettings("petrel", 3, 0, false)));
    }

    /** So many backends, all at one address, with weights from 1 to 3. */
    static Balancer many(InetSocketAddress backend, PickSettings pick, int backends) throws Exception {
        return start(
                backend,
                pick,
                IntStream.range(0, backends)
                        .mapToObj(number -> new BackendSettings("fulmar-" + number, 1 + number % 3, 0, false))
                        .toList());
    }

    private static Balancer start(InetSocketAddress address, PickSettings pick, List<BackendSettings> backends)
            throws Exception {
        PoolSettings pool = PoolSettings.named("seats", pick)
                .retry(new RetrySettings(1, 0.4, 10, Set.of()))
                .timeouts(new TimeoutSettings(5 * SECOND, 30 * SECOND, 60 * SECOND))
                .of(backends);
        Balancer balancer = Balancer.start(
                new BalancerSettings("steelyard", 1, List.of(new HostSettings("north-quay", 1)), List.of(pool)),
                number -> address,
                number -> 0,
                System::nanoTime,
                Draws.of(new Chance(1)),
                new DecisionSink() {}); // what a recorder costs is not the balancer's
        balancer.begin(System.nanoTime());
        return balancer;
    }
}
