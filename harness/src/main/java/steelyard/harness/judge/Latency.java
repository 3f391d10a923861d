package steelyard.harness.judge;

import java.util.Set;
import steelyard.harness.record.Wording;

/**
 * {@code latency}: a quantile, in which a failed request is infinitely slow, to three significant digits; or the mean
 * of the good answers, exact.
 */
final class Latency extends Meter {
    private static final double MEAN = -1;

    private final WindowLatencies latencies;
    private final double quantile;

    /** @param quantile from 0 to 1, or -1 for the mean */
    Latency(WindowLatencies latencies, double quantile) {
        this.latencies = latencies;
        this.quantile = quantile;
    }

    @Override
    Set<Hears> hears() {
        return Set.of();
    }

    @Override
    Reading read() {
        long good = latencies.good().getTotalCount();
        if (good + latencies.failed() == 0) {
            return Reading.notMeasured("no request was due");
        }
        return quantile == MEAN ? mean(good) : quantile(good);
    }

    private Reading mean(long good) {
        if (good == 0) {
            return Reading.notMeasured("no request was answered well");
        }
        return latencies.failed() == 0
                ? Reading.of(latencies.meanNanos())
                : Reading.noted(latencies.meanNanos(), requests(latencies.failed()) + " left out");
    }

    private Reading quantile(long good) {
        long all = good + latencies.failed();
        long rank = Math.max(1, (long) StrictMath.ceil(quantile * all));
        if (rank > good) {
            return Reading.infinite(requests(latencies.failed()) + " of " + all);
        }
        // Half a rank lower: the histogram rounds up, so that no rounding of the division can reach the next rank.
        return Reading.of(latencies.good().getValueAtPercentile((rank - 0.5) / good * 100));
    }

    private static String requests(long count) {
        return Wording.count(count, "failed request", "failed requests");
    }
}
