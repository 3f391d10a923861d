package steelyard.drills.model;

/**
 * How much a pool's backends are given at once, and what happens to the rest.
 *
 * @param most in flight on each backend, at least 1
 * @param waiting how many may wait in the queue of the pool, which is served in order; one more gets 503
 * @param waitNanos one that waited that long gets 503; above zero
 */
public record InFlight(int most, int waiting, long waitNanos) {
    /** The longest wait unless a drill says otherwise: a second. */
    public static final long USUAL_WAIT_NANOS = 1_000_000_000L;

    public InFlight {
        Check.positive(most, "most");
        Check.notNegative(waiting, "waiting");
        Check.positive(waitNanos, "wait");
    }
}
