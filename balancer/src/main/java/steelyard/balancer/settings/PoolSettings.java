package steelyard.balancer.settings;

import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * One pool.
 *
 * @param probe null for no probes: every backend counts as up
 * @param warmUp null for a return at full weight
 * @param drainLimitNanos what is in flight that long after a drain began is cut; above zero
 * @param retry null for none
 * @param forwarded whether requests get the Forwarded field (RFC 7239)
 * @param frontPort the port to listen on, or 0 for one that the caller of the live side chooses
 */
public record PoolSettings(
        String name,
        Method method,
        Count count,
        Weights weights,
        @Nullable ProbeSettings probe,
        @Nullable WarmUpSettings warmUp,
        long drainLimitNanos,
        @Nullable RetrySettings retry,
        TimeoutSettings timeouts,
        boolean forwarded,
        int frontPort,
        List<BackendSettings> backends) {

    public PoolSettings {
        backends = List.copyOf(backends);
        Check.that(!backends.isEmpty(), "pool %s has no backend", name);
        Check.that(
                weights == Weights.BACKEND || method == Method.WEIGHTED_ROUND_ROBIN,
                "pool %s: turns of hosts are those of weighted round robin, not of %s",
                name,
                method);
        Check.that(drainLimitNanos > 0, "drain limit of pool %s: %d ns", name, drainLimitNanos);
    }

    /** How a backend is picked for one unit of work. */
    public enum Method {
        ROUND_ROBIN,
        WEIGHTED_ROUND_ROBIN,
        STRIDE,
        LEAST_CONNECTIONS
    }

    /** The unit that a method spreads. */
    public enum Count {
        REQUESTS,
        CONNECTIONS
    }

    /** Whose weights count. */
    public enum Weights {
        BACKEND,
        HOST
    }
}
