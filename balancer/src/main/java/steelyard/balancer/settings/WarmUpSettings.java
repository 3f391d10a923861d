package steelyard.balancer.settings;

/**
 * The ramp of a backend that returns.
 *
 * @param rampNanos how long it takes, above zero
 * @param floor the fraction of the weight at the return, from 0.001 to 1: at the least a turn in a thousand
 */
public record WarmUpSettings(long rampNanos, double floor) {
    public WarmUpSettings {
        Check.that(rampNanos > 0, "ramp %d ns", rampNanos);
        Check.that(floor >= 0.001 && floor <= 1, "floor %s", floor);
    }
}
