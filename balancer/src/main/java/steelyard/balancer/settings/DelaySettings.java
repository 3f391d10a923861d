package steelyard.balancer.settings;

/**
 * How the method of the shortest expected delay looks at a pool.
 *
 * @param all whether every member is looked at, instead of two drawn by weight
 * @param memoryNanos the time in which what was seen loses weight by a factor of e, above zero
 */
public record DelaySettings(boolean all, long memoryNanos) {
    /** Two candidates, ten seconds. */
    public static final DelaySettings USUAL = new DelaySettings(false, 10_000_000_000L);

    public DelaySettings {
        Check.that(memoryNanos > 0, "memory: %d ns", memoryNanos);
    }
}
