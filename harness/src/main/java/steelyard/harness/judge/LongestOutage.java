package steelyard.harness.judge;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;
import steelyard.harness.record.Slice;

/**
 * {@code longest-outage}: the longest run of slices, by due time, in each of which failures are at least the set share.
 * A slice without traffic neither breaks a run nor lengthens it.
 */
final class LongestOutage extends Requests {
    private final double share;
    private final int[] due;
    private final int[] failed;

    LongestOutage(Window window, boolean[] trafficCounts, double share) {
        super(window, trafficCounts);
        this.share = share;
        due = new int[window.slices()];
        failed = new int[window.slices()];
    }

    @Override
    void count(long dueNanos, long tookNanos, @Nullable Cause cause) {
        int slice = window().slice(dueNanos);
        due[slice]++;
        if (cause != null) {
            failed[slice]++;
        }
    }

    @Override
    Reading read() {
        int run = 0;
        int longest = 0;
        for (int slice = 0; slice < due.length; slice++) {
            if (due[slice] > 0) {
                run = failed[slice] > 0 && failed[slice] >= share * due[slice] ? run + 1 : 0;
                longest = Math.max(longest, run);
            }
        }
        return Reading.of((double) longest * Slice.NANOS);
    }
}
