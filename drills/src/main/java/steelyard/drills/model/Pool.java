package steelyard.drills.model;

import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Backends that serve the same requests, and how the balancer treats them.
 *
 * @param probe how health is probed, or null for no probes
 * @param warmUp how a returning backend is ramped up, or null for at once
 * @param drainLimitNanos what is in flight that long after a drain began is cut
 * @param retry null for none
 * @param forwarded whether the balancer adds the Forwarded field (RFC 7239)
 * @param frontPort the port that the pool's front must have, or 0 for any free one
 * @param backends at least one, in list order
 */
public record Pool(
        String name,
        Method method,
        Count count,
        Weights weights,
        @Nullable Probe probe,
        @Nullable WarmUp warmUp,
        long drainLimitNanos,
        @Nullable Retry retry,
        Timeouts timeouts,
        boolean forwarded,
        int frontPort,
        List<Backend> backends) {

    public Pool {
        backends = List.copyOf(backends);
        Check.that(!backends.isEmpty(), "pool %s has no backend", name);
        Check.positive(drainLimitNanos, "drain limit of pool " + name);
        Check.that(frontPort >= 0 && frontPort <= 65_535, "port %d", frontPort);
    }

    /** How a pool picks a backend for one unit of work. */
    public enum Method implements Worded {
        ROUND_ROBIN("round-robin"),
        WEIGHTED_ROUND_ROBIN("weighted-round-robin"),
        STRIDE("stride"),
        LEAST_CONNECTIONS("least-connections");

        private final String word;

        Method(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }

    /** The unit that a method spreads. */
    public enum Count implements Worded {
        REQUESTS("requests"),
        CONNECTIONS("connections");

        private final String word;

        Count(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }

    /** Whose weights count. */
    public enum Weights implements Worded {
        BACKEND("backend"),
        HOST("host");

        private final String word;

        Weights(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }
}
