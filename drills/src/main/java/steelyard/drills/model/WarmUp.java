package steelyard.drills.model;

/**
 * The ramp of a backend that returns: its fraction of the full weight is {@code max(floor, time since return / ramp)}.
 *
 * @param rampNanos how long the ramp takes, above zero
 * @param floor the fraction at the return, above 0 and at most 1
 */
public record WarmUp(long rampNanos, double floor) {
    public WarmUp {
        Check.positive(rampNanos, "warm-up");
        Check.that(floor > 0 && floor <= 1, "floor is above 0 and at most 1, not %s", floor);
    }
}
