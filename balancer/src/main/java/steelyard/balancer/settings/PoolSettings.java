package steelyard.balancer.settings;

import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * One pool. {@link #named} begins one whose settings are the usual but for some.
 *
 * @param probe null for no probes: every backend counts as up
 * @param warmUp null for a return at full weight
 * @param retry null for none
 * @param load what load weights are computed from; there where, and only where, weights are those of load
 * @param affinity null for none
 * @param bench null for none
 * @param inFlight null for no limit
 */
public record PoolSettings(
        String name,
        PickSettings pick,
        @Nullable ProbeSettings probe,
        @Nullable WarmUpSettings warmUp,
        DrainSettings drain,
        @Nullable RetrySettings retry,
        @Nullable LoadSettings load,
        @Nullable AffinitySettings affinity,
        @Nullable BenchSettings bench,
        ReserveSettings reserve,
        @Nullable InFlightSettings inFlight,
        TimeoutSettings timeouts,
        LimitSettings limits,
        FrontSettings front,
        List<BackendSettings> backends) {

    public PoolSettings {
        backends = List.copyOf(backends);
        Check.that(!backends.isEmpty(), "pool %s has no backend", name);
        Check.that(
                pick.weights() != Weights.HOST || pick.method() == Method.WEIGHTED_ROUND_ROBIN,
                "pool %s: turns of hosts are those of weighted round robin, not of %s",
                name,
                pick.method());
        Check.that(
                (pick.weights() == Weights.LOAD) == (load != null),
                "pool %s: load weights, and no others, are read",
                name);
        Check.that(
                front.kind() == FrontSettings.Kind.HTTP || pick.count() == Count.CONNECTIONS,
                "pool %s: a front of octets counts connections",
                name);
        Check.that(
                pick.method() != Method.HASH
                        || pick.hash().table() != HashSettings.Table.PERMUTATION
                        || pick.hash().size() > backends.size(),
                "pool %s: a permutation table has more places than there are backends",
                name);
        boolean standsBy = backends.stream().anyMatch(each -> each.tier() == 2);
        Check.that(
                !standsBy || reserve.standby() > 0 && backends.stream().anyMatch(each -> each.tier() == 1),
                "pool %s: backends of tier 2 stand by for tier 1, below a share of it",
                name);
    }

    /** Begins a pool. */
    public static PoolBuilder named(String name, PickSettings pick) {
        return new PoolBuilder(name, pick);
    }

    /**
     * The same pool, picking otherwise.
     *
     * @throws IllegalArgumentException for what its other settings rule out
     */
    public PoolSettings with(PickSettings changed) {
        return new PoolSettings(
                name, changed, probe, warmUp, drain, retry, load, affinity, bench, reserve, inFlight, timeouts, limits,
                front, backends);
    }

    /** The same pool, draining otherwise. */
    public PoolSettings with(DrainSettings changed) {
        return new PoolSettings(
                name, pick, probe, warmUp, changed, retry, load, affinity, bench, reserve, inFlight, timeouts, limits,
                front, backends);
    }

    public Method method() {
        return pick.method();
    }

    public Count count() {
        return pick.count();
    }

    public Weights weights() {
        return pick.weights();
    }

    /** How a backend is picked for one unit of work. */
    public enum Method {
        ROUND_ROBIN,
        WEIGHTED_ROUND_ROBIN,
        STRIDE,
        RANDOM,
        WEIGHTED_RANDOM,
        LEAST_CONNECTIONS,
        TWO_CHOICES,
        JOIN_IDLE_QUEUE,
        EXPECTED_DELAY,
        HASH
    }

    /** The unit that a method spreads. */
    public enum Count {
        REQUESTS,
        CONNECTIONS
    }

    /** Whose weights count. */
    public enum Weights {
        BACKEND,
        HOST,
        /** The backends' own, times the headroom that load probes read. */
        LOAD
    }
}
