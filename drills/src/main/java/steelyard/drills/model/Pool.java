package steelyard.drills.model;

import java.util.List;
import java.util.Objects;
import org.jspecify.annotations.Nullable;

/**
 * Backends that serve the same requests, and how the balancer treats them.
 *
 * @param inFlight how much a backend is given at once, or null for no limit
 * @param retry null for none
 * @param backends at least one, in list order
 */
public record Pool(
        String name,
        Picking picking,
        Health health,
        Reserve reserve,
        @Nullable InFlight inFlight,
        Drain drain,
        @Nullable Retry retry,
        Timeouts timeouts,
        Limits limits,
        Wire wire,
        List<Backend> backends) {

    public Pool {
        backends = List.copyOf(backends);
        Objects.requireNonNull(drain);
        Objects.requireNonNull(timeouts);
        Objects.requireNonNull(limits);
        Check.that(!backends.isEmpty(), "pool %s has no backend", name);
        Check.that(
                picking.weights() != Weights.LOAD || health.load() != null,
                "pool %s weighs by load and reads none",
                name);
        boolean standby = backends.stream().anyMatch(backend -> backend.tier() == 2);
        Check.that(standby == reserve.standby() > 0, "pool %s: tier 2 and standby go together", name);
        boolean octets = wire.front().kind() == Front.Kind.TCP;
        Check.that(!octets || picking.count() == Count.CONNECTIONS, "pool %s: a tcp front spreads connections", name);
        Check.that(!octets || retry == null, "pool %s: a tcp front cannot retry a request", name);
    }

    /** Begins a pool with a method and all else as usual. */
    public static PoolBuilder with(String name, Picking picking) {
        return new PoolBuilder(name, picking);
    }

    /** Begins a pool that is like this one. */
    public PoolBuilder like() {
        return new PoolBuilder(this);
    }

    public Method method() {
        return picking.method();
    }

    public Count count() {
        return picking.count();
    }

    public Weights weights() {
        return picking.weights();
    }

    /** How health is probed, or null for no probes. */
    public @Nullable Probe probe() {
        return health.probe();
    }

    /** How a returning backend is ramped up, or null for at once. */
    public @Nullable WarmUp warmUp() {
        return health.warmUp();
    }

    /** Whether its unit of work is a connection that is passed on as it is. */
    public boolean passesOctets() {
        return wire.front().kind() == Front.Kind.TCP;
    }

    /** How a pool picks a backend for one unit of work. */
    public enum Method implements Worded {
        ROUND_ROBIN("round-robin", false),
        WEIGHTED_ROUND_ROBIN("weighted-round-robin", true),
        STRIDE("stride", true),
        RANDOM("random", false),
        WEIGHTED_RANDOM("weighted-random", true),
        LEAST_CONNECTIONS("least-connections", true),
        TWO_CHOICES("two-choices", true),
        JOIN_IDLE_QUEUE("join-idle-queue", false),
        EXPECTED_DELAY("expected-delay", true),
        HASH("hash", true);

        private final String word;
        private final boolean weighs;

        Method(String word, boolean weighs) {
            this.word = word;
            this.weighs = weighs;
        }

        @Override
        public String word() {
            return word;
        }

        /** Whether weights play a part. */
        public boolean weighs() {
            return weighs;
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
        HOST("host"),
        /** The backends' own, times the headroom that load probes read. */
        LOAD("load");

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
