package steelyard.balancer.core.pick;

/**
 * Service times of members, as far as a balancer can see them from outside, and their decayed means.
 *
 * <p>What is seen is the time from one answer to the next while something is in flight, or from the beginning where nothing
 * was. Behind one worker that serves in order this is the service time, exactly, whatever waited. Behind c busy workers it is
 * the time between two answers, a c-th of the service time: what one more unit of work in flight adds to the delay, which
 * is what the figure is for. Attempts without an answer are not seen, and the time that they took counts with the next one
 * that has one.
 *
 * <p>A value seen loses weight by a factor of e in each memory time until the next one comes. A member of which nothing was
 * seen, or nothing for a whole memory time, counts at the mean of the others' means. So a member that was slow is tried again,
 * and not shunned for ever on what it once did.
 */
final class ServiceTimes {
    private static final int NOBODY = Tournament.NOBODY;

    private final long memoryNanos;
    private final long[] sinceNanos;
    private final long[] seenAtNanos;
    private final double[] sum;
    private final double[] count;
    private final double[] mean;
    private final boolean[] busy;
    /** Those of whom something was seen, the longest ago first. */
    private final Line seen;

    private int seenCount;
    private double sumOfMeans;

    ServiceTimes(int members, long memoryNanos) {
        this.memoryNanos = memoryNanos;
        sinceNanos = new long[members];
        seenAtNanos = new long[members];
        sum = new double[members];
        count = new double[members];
        mean = new double[members];
        busy = new boolean[members];
        seen = new Line(members);
    }

    boolean seen(int member) {
        return seen.has(member);
    }

    /** The decayed mean of what was seen of a member in nanoseconds, or the mean of the means of those seen; 1 if none. */
    double mean(int member) {
        return seen(member) ? mean[member] : meanOfMeans();
    }

    double meanOfMeans() {
        return seenCount == 0 ? 1 : sumOfMeans / seenCount;
    }

    void began(int member, long nowNanos) {
        if (!busy[member]) {
            busy[member] = true;
            sinceNanos[member] = nowNanos;
        }
    }

    /** An attempt ended, of so many that are still in flight. */
    void ended(int member, int inFlight, boolean answered, long nowNanos) {
        if (answered && busy[member]) {
            answered(member, nowNanos);
        }
        busy[member] = inFlight > 0;
    }

    private void answered(int member, long nowNanos) {
        double kept = seen(member) ? StrictMath.exp((double) (seenAtNanos[member] - nowNanos) / memoryNanos) : 0;
        forget(member);
        sum[member] = sum[member] * kept + (nowNanos - sinceNanos[member]);
        count[member] = count[member] * kept + 1;
        mean[member] = sum[member] / count[member];
        sinceNanos[member] = nowNanos;
        seenAtNanos[member] = nowNanos;
        seen.join(member);
        sumOfMeans += mean[member];
        seenCount++;
    }

    /** Forgets one member whose memory time is over and says which, or NOBODY; to be asked until it says that. */
    int forgetOne(long nowNanos) {
        int oldest = seen.head();
        if (oldest == NOBODY || nowNanos - seenAtNanos[oldest] <= memoryNanos) {
            return NOBODY;
        }
        forget(oldest);
        return oldest;
    }

    private void forget(int member) {
        if (seen(member)) {
            seen.leave(member);
            seenCount--;
            // With nobody left the sum begins anew, and what rounding left over with it.
            sumOfMeans = seenCount == 0 ? 0 : sumOfMeans - mean[member];
        }
    }
}
