package steelyard.balancer.core.standing;

/**
 * One change of a backend's standing.
 *
 * @param backend its number
 * @param cause what brought it about
 * @param atNanos when, on the caller's clock
 */
public record Transition(int backend, Standing from, Standing to, Cause cause, long atNanos) {
    public Transition {
        if (from == to) {
            throw new IllegalArgumentException("not a change: " + from);
        }
    }

    /** What changes a standing. */
    public enum Cause {
        /** Probes missed in a row. */
        MISSES,
        /** Probes passed in a row. */
        PASSES,
        /** Attempts failed: the bench time began. */
        FAILURES,
        /** The bench time is over. */
        FREED,
        /** The ramp came to its end. */
        RAMPED,
        /** A drain began. */
        DRAIN,
        /** Admitted by hand. */
        ADMIT,
        /** Withdrawn by hand. */
        WITHDRAW
    }
}
