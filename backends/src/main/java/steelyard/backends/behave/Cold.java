package steelyard.backends.behave;

/**
 * Cold caches: after a revive, work takes its time times {@code 1 + (factor - 1) exp(-t / decay)}, where t is the time from
 * the revive to the start of the work. The usual picture of a cache that fills at a rate in proportion to what it still
 * misses (common practice). Immutable, any thread.
 *
 * @param factor what work takes right after the revive, over what it takes when warm, 1 or above
 * @param decayNanos after this long the excess is down to 1/e, above 0 and at most a day
 */
public record Cold(double factor, long decayNanos) {
    public Cold {
        if (!(factor >= 1) || Double.isInfinite(factor)) {
            throw new IllegalArgumentException("cold needs a factor of 1 or more, but got " + factor);
        }
        if (decayNanos <= 0 || decayNanos > ServiceTime.LONGEST_NANOS) {
            throw new IllegalArgumentException(
                    "cold needs a decay above 0 and at most a day, but got " + decayNanos + " ns");
        }
    }

    /** What {@code nanos} of work becomes when it starts so long after the revive, at most a day. */
    long slowed(long nanos, long sinceNanos) {
        double times = 1 + (factor - 1) * StrictMath.exp(-(double) sinceNanos / decayNanos);
        return (long) Math.min(ServiceTime.LONGEST_NANOS, StrictMath.rint(nanos * times));
    }
}
