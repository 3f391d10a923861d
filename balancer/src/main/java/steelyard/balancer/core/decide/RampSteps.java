package steelyard.balancer.core.decide;

/** Which members of a pool warm up, and when their weights are told anew. Known by their place in the pool. */
final class RampSteps {
    /** The ramp of a method that does not take turns is told in steps of a thousandth of its length. */
    private static final int STEPS = 1000;

    private final boolean[] warming;
    private final long stepNanos;
    private int count;
    private long nextNanos;

    /** @param rampNanos the length of a ramp; 0 where nobody warms up */
    RampSteps(int members, long rampNanos) {
        warming = new boolean[members];
        stepNanos = rampNanos == 0 ? 0 : Math.max(1, rampNanos / STEPS);
    }

    boolean warming(int member) {
        return warming[member];
    }

    /** Notes whether a member warms up, and says whether that is news. */
    boolean note(int member, boolean isWarming, long nowNanos) {
        if (isWarming == warming[member]) {
            return false;
        }
        warming[member] = isWarming;
        count += isWarming ? 1 : -1;
        nextNanos = nowNanos + stepNanos;
        return true;
    }

    /** Whether somebody warms up and the next step has come; the one behind it is then a step away. */
    boolean take(long nowNanos) {
        if (count == 0 || nowNanos - nextNanos < 0) {
            return false;
        }
        nextNanos = nowNanos + stepNanos;
        return true;
    }
}
