package steelyard.balancer.settings;

/**
 * When live failures set a backend aside, and for how long.
 *
 * @param after failures in a row that bench a backend, at least 1
 * @param share of failures within {@code overNanos} that benches it, from 0 to 1; 0 for no such rule
 * @param overNanos the window of that share, above zero
 * @param least attempts in the window below which the share says nothing, at least 1
 * @param timeNanos the first bench time, above zero; doubles with each further one
 * @param mostNanos the greatest, at least the first
 * @param quietNanos free for that long, a backend's next bench time is one doubling shorter; above zero
 * @param cap of the pool's backends at most that share is benched at once, from 0 to 1
 */
public record BenchSettings(
        int after,
        double share,
        long overNanos,
        int least,
        long timeNanos,
        long mostNanos,
        long quietNanos,
        double cap) {
    public BenchSettings {
        Check.that(after >= 1, "after %d failures", after);
        Check.that(share >= 0 && share <= 1, "share %s", share);
        Check.that(overNanos > 0, "over %d ns", overNanos);
        Check.that(least >= 1, "least %d", least);
        Check.that(timeNanos > 0 && mostNanos >= timeNanos, "bench time %d to %d ns", timeNanos, mostNanos);
        Check.that(quietNanos > 0, "quiet %d ns", quietNanos);
        Check.that(cap >= 0 && cap <= 1, "cap %s", cap);
    }
}
