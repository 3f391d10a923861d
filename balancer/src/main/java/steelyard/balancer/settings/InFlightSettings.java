package steelyard.balancer.settings;

/**
 * How much may be in flight on one backend, and what waits for a place.
 *
 * @param most attempts in flight on one backend, at least 1
 * @param waiting requests of the pool that may wait when every backend is full; one more gets 503
 * @param waitNanos one that waits that long gets 503; above zero
 */
public record InFlightSettings(int most, int waiting, long waitNanos) {
    public InFlightSettings {
        Check.that(most >= 1, "most in flight: %d", most);
        Check.that(waiting >= 0, "waiting: %d", waiting);
        Check.that(waitNanos > 0, "wait %d ns", waitNanos);
    }
}
