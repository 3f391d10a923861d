package steelyard.harness.judge;

import org.HdrHistogram.Histogram;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;
import steelyard.harness.record.Wording;

/**
 * {@code latency}: a quantile, in which a failed request is infinitely slow, to three significant digits; or the mean
 * of the good answers, exact.
 */
final class Latency extends Requests {
    private static final double MEAN = -1;
    private static final long FINEST_NANOS = 1_000;

    private final double quantile;
    private final @Nullable Histogram histogram;
    private long good;
    private long failed;
    private long sumNanos;

    /** @param quantile from 0 to 1, or -1 for the mean */
    Latency(Window window, boolean[] trafficCounts, double quantile) {
        super(window, trafficCounts);
        this.quantile = quantile;
        histogram = quantile == MEAN ? null : new Histogram(FINEST_NANOS, 1_000_000_000L, 3);
        if (histogram != null) {
            histogram.setAutoResize(true);
        }
    }

    @Override
    void count(long dueNanos, long tookNanos, @Nullable Cause cause) {
        if (cause != null) {
            failed++;
            return;
        }
        good++;
        sumNanos += tookNanos;
        if (histogram != null) {
            histogram.recordValue(Math.max(0, tookNanos));
        }
    }

    @Override
    Reading read() {
        if (good + failed == 0) {
            return Reading.notMeasured("no request was due");
        }
        return histogram == null ? mean() : quantile(histogram);
    }

    private Reading mean() {
        if (good == 0) {
            return Reading.notMeasured("no request was answered well");
        }
        double mean = (double) sumNanos / good;
        return failed == 0 ? Reading.of(mean) : Reading.noted(mean, requests(failed) + " left out");
    }

    private Reading quantile(Histogram latencies) {
        long rank = Math.max(1, (long) StrictMath.ceil(quantile * (good + failed)));
        if (rank > good) {
            return Reading.infinite(requests(failed) + " of " + (good + failed));
        }
        // Half a rank lower: the histogram rounds up, so that no rounding of the division can reach the next rank.
        return Reading.of(latencies.getValueAtPercentile((rank - 0.5) / good * 100));
    }

    private static String requests(long count) {
        return Wording.count(count, "failed request", "failed requests");
    }
}
