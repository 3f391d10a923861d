package steelyard.harness.judge;

import java.util.Arrays;
import org.HdrHistogram.Histogram;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;

/** Latencies of the requests of one window and one choice of streams. Shared by every meter that reads a quantile of them. */
final class WindowLatencies {
    private static final long FINEST_NANOS = 1_000;

    private final Window window;
    private final boolean[] trafficCounts;
    /** Of good answers, to three significant digits. */
    private final Histogram good = new Histogram(FINEST_NANOS, 1_000_000_000L, 3);

    private long sumNanos;
    private long failed;

    WindowLatencies(Window window, boolean[] trafficCounts) {
        this.window = window;
        this.trafficCounts = trafficCounts;
        good.setAutoResize(true);
    }

    boolean isOf(Window otherWindow, boolean[] otherTraffic) {
        return window.equals(otherWindow) && Arrays.equals(trafficCounts, otherTraffic);
    }

    void ended(long atNanos, long dueNanos, int traffic, @Nullable Cause cause) {
        if (!window.holds(dueNanos) || !trafficCounts[traffic]) {
            return;
        }
        if (cause == null) {
            good.recordValue(Math.max(0, atNanos - dueNanos));
            sumNanos += atNanos - dueNanos;
        } else {
            failed++;
        }
    }

    Histogram good() {
        return good;
    }

    /** Of good answers, exact. */
    double meanNanos() {
        return (double) sumNanos / good.getTotalCount();
    }

    long failed() {
        return failed;
    }
}
