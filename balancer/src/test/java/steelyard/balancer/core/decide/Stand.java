package steelyard.balancer.core.decide;

import java.util.List;
import java.util.Set;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.AffinitySettings;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.BenchSettings;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.InFlightSettings;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.PoolSettings.Method;
import steelyard.balancer.settings.PoolSettings.Weights;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.balancer.settings.ReserveSettings;
import steelyard.balancer.settings.RetrySettings;
import steelyard.balancer.settings.WarmUpSettings;

/** Settings for tests, built up pool by pool; one unit of time is a nanosecond. */
final class Stand {
    static final RetrySettings RETRY = new RetrySettings(1, 0.5, 2, Set.of(503));

    private Method method = Method.ROUND_ROBIN;
    private Weights weights = Weights.BACKEND;
    private @Nullable ProbeSettings probe;
    private @Nullable WarmUpSettings warmUp;
    private @Nullable RetrySettings retry;
    private @Nullable BenchSettings bench;
    private @Nullable InFlightSettings inFlight;
    private @Nullable AffinitySettings affinity;
    private @Nullable LoadSettings load;
    private ReserveSettings reserve = ReserveSettings.NONE;
    private boolean keepsClients;
    private List<BackendSettings> backends = List.of();

    static Stand of(Method method, int members) {
        Stand stand = new Stand();
        stand.method = method;
        stand.backends = IntStream.range(0, members)
                .mapToObj(i -> new BackendSettings("backend-" + i, 1, 0, false))
                .toList();
        return stand;
    }

    static Stand byHost(BackendSettings... backends) {
        Stand stand = of(Method.WEIGHTED_ROUND_ROBIN, 0);
        stand.weights = Weights.HOST;
        stand.backends = List.of(backends);
        return stand;
    }

    Stand probe(ProbeSettings settings) {
        probe = settings;
        return this;
    }

    Stand warmUp(long ramp, double floor) {
        warmUp = new WarmUpSettings(ramp, floor);
        return this;
    }

    Stand retry(RetrySettings settings) {
        retry = settings;
        return this;
    }

    Stand bench(BenchSettings settings) {
        bench = settings;
        return this;
    }

    Stand inFlight(int most, int waiting, long wait) {
        inFlight = new InFlightSettings(most, waiting, wait);
        return this;
    }

    /** Clients are held for 1000. */
    Stand affinity(AffinitySettings.By by) {
        affinity = new AffinitySettings(by, "berth", 1_000);
        return this;
    }

    Stand keepingClients() {
        keepsClients = true;
        return this;
    }

    Stand load(LoadSettings settings) {
        weights = Weights.LOAD;
        load = settings;
        return this;
    }

    Stand reserve(double lastResort, double standby) {
        reserve = new ReserveSettings(lastResort, standby);
        return this;
    }

    /** The last so many members stand by. */
    Stand standingBy(int last) {
        int first = backends.size() - last;
        backends = IntStream.range(0, backends.size())
                .mapToObj(i -> new BackendSettings("backend-" + i, 1, 0, false, i < first ? 1 : 2))
                .toList();
        return this;
    }

    Stand startingDown() {
        backends = backends.stream()
                .map(each -> new BackendSettings(each.name(), each.weight(), each.host(), true))
                .toList();
        return this;
    }

    private PoolSettings pool(String name) {
        return PoolSettings.named(name, PickSettings.of(method).with(weights))
                .probe(probe)
                .warmUp(warmUp)
                .drain(new DrainSettings(30_000, keepsClients))
                .retry(retry)
                .bench(bench)
                .inFlight(inFlight)
                .affinity(affinity)
                .load(load)
                .reserve(reserve)
                .of(backends);
    }

    /** An instance of these pools on two hosts of weight 8. */
    static BalancerSettings settings(Stand... pools) {
        return new BalancerSettings(
                "test",
                1,
                List.of(new HostSettings("north", 8), new HostSettings("south", 8)),
                IntStream.range(0, pools.length)
                        .mapToObj(i -> pools[i].pool("pool-" + i))
                        .toList());
    }
}
