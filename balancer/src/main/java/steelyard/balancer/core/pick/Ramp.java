package steelyard.balancer.core.pick;

/** How far members of a pool have warmed up. */
@FunctionalInterface
public interface Ramp {
    /** The fraction that counts as full. */
    long FULL = 1_000_000_000;

    /** Nobody warms up: always full. */
    Ramp NONE = (member, nowNanos) -> FULL;

    /** The ramp fraction of a member at an instant, in billionths: above 0, at most {@link #FULL}. */
    long fraction(int member, long nowNanos);
}
