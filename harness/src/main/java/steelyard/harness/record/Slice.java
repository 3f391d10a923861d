package steelyard.harness.record;

import java.util.Arrays;
import org.HdrHistogram.Histogram;
import org.HdrHistogram.IntCountsHistogram;
import steelyard.balancer.core.standing.Standing;
import steelyard.drills.model.Cause;

/**
 * One tenth of a second of a play. Filled and handed out by a {@link SliceBook}, which takes it back afterwards: a
 * receiver keeps no reference.
 *
 * <p>Requests are counted by due time; attempts by the time of their pick; the state of the backends is that of the
 * sample at the slice's end.
 */
public final class Slice {
    /** Length of a slice. */
    public static final long NANOS = 100_000_000L;

    private static final Cause[] CAUSES = Cause.values();
    private static final long FINEST_NANOS = 1_000;

    long index;
    int ok;
    int retries;
    final int[] failedBy = new int[CAUSES.length];
    /** Latency of good answers; takes whatever comes, three significant digits. */
    final IntCountsHistogram latency = new IntCountsHistogram(FINEST_NANOS, 1_000_000_000L, 3);

    /** The same by pool, where it is kept; otherwise empty. */
    final IntCountsHistogram[] latencyOf;

    /** Requests by pool. */
    final int[] offeredTo;

    final int[] failedOf;
    final int[] picked;
    final int[] inFlight;
    final Standing[] standing;
    final double[] weight;
    final double[] entitled;
    final double[] utilisation;
    final double[] headroom;
    final int[] waiting;
    final int[] waitingForBackend;

    /** Requests told as due within this slice that have not ended, and the number of the first of them. */
    int open;

    long firstTold;

    /** @param byPool whether latencies are kept by pool too, which takes some 80 KiB each */
    Slice(int backends, int pools, boolean byPool) {
        latency.setAutoResize(true);
        latencyOf = new IntCountsHistogram[byPool ? pools : 0];
        for (int pool = 0; pool < latencyOf.length; pool++) {
            latencyOf[pool] = new IntCountsHistogram(FINEST_NANOS, 1_000_000_000L, 3);
            latencyOf[pool].setAutoResize(true);
        }
        offeredTo = new int[pools];
        failedOf = new int[pools];
        picked = new int[backends];
        inFlight = new int[backends];
        standing = new Standing[backends];
        weight = new double[backends];
        entitled = new double[backends];
        utilisation = new double[backends];
        headroom = new double[backends];
        waiting = new int[backends];
        waitingForBackend = new int[pools];
    }

    void reset(long newIndex, long newFirstTold) {
        index = newIndex;
        firstTold = newFirstTold;
        open = 0;
        ok = 0;
        retries = 0;
        Arrays.fill(failedBy, 0);
        Arrays.fill(offeredTo, 0);
        Arrays.fill(failedOf, 0);
        Arrays.fill(picked, 0);
        Arrays.fill(utilisation, 0);
        latency.reset();
        for (IntCountsHistogram each : latencyOf) {
            each.reset();
        }
    }

    /** From 0; the slice begins at {@code index * NANOS}. */
    public long index() {
        return index;
    }

    public int offered() {
        return ok + failed();
    }

    public int ok() {
        return ok;
    }

    public int failed() {
        int sum = 0;
        for (int each : failedBy) {
            sum += each;
        }
        return sum;
    }

    public int failedBy(Cause cause) {
        return failedBy[cause.ordinal()];
    }

    /** Requests that go to a pool, by its number. */
    public int offeredTo(int pool) {
        return offeredTo[pool];
    }

    /** Requests that go to a pool and failed. */
    public int failedOf(int pool) {
        return failedOf[pool];
    }

    /** Attempts beyond the first that were picked. */
    public int retries() {
        return retries;
    }

    /** A quantile of the latency of good answers, in nanoseconds; there must be one. */
    public long latencyNanos(double quantile) {
        return latency.getValueAtPercentile(quantile * 100);
    }

    /** Adds the latencies of good answers to a histogram of nanoseconds. */
    public void addLatencies(Histogram sum) {
        sum.add(latency);
    }

    /** Adds those of one pool; only where {@link #knowsPools}. */
    void addLatenciesOf(int pool, Histogram sum) {
        sum.add(latencyOf[pool]);
    }

    /** Whether latencies are kept by pool. */
    boolean knowsPools() {
        return latencyOf.length > 0;
    }

    public int picked(int backend) {
        return picked[backend];
    }

    public int inFlight(int backend) {
        return inFlight[backend];
    }

    public Standing standing(int backend) {
        return standing[backend];
    }

    /** Effective weight. */
    public double weight(int backend) {
        return weight[backend];
    }

    /** Entitled share, from 0 to 1. */
    public double entitled(int backend) {
        return entitled[backend];
    }

    /** Busy share of the workers over the slice, from 0 to 1. */
    public double utilisation(int backend) {
        return utilisation[backend];
    }

    /** What the set weight is multiplied by for the backend's load, from 0 to 1. */
    public double headroom(int backend) {
        return headroom[backend];
    }

    /** Requests of a pool that wait in the balancer for a backend to be free. */
    public int waitingForBackend(int pool) {
        return waitingForBackend[pool];
    }

    /** Requests waiting in the backend's own queue. */
    public int waiting(int backend) {
        return waiting[backend];
    }
}
