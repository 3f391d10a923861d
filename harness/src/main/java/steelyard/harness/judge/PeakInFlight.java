package steelyard.harness.judge;

import java.util.Set;
import steelyard.balancer.core.decide.Outcome;

/**
 * {@code peak-in-flight}: the most attempts in flight at one instant of the window, as the balancer counts them. Of a
 * target, that of the member with most; of the whole stage, all backends together.
 */
final class PeakInFlight extends Meter {
    private final Window window;
    private final boolean[] backendCounts;
    private final boolean together;
    private final int[] level;
    private final long[] sinceNanos;
    private long sum;
    private long sumSinceNanos;
    private long peak;

    PeakInFlight(Window window, boolean[] backendCounts, boolean together) {
        this.window = window;
        this.backendCounts = backendCounts;
        this.together = together;
        level = new int[backendCounts.length];
        sinceNanos = new long[backendCounts.length];
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.PICKS, Hears.ATTEMPT_ENDS);
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        moved(atNanos, backend, inFlight);
    }

    @Override
    public void attemptEnded(
            long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        moved(atNanos, backend, inFlight);
    }

    @Override
    public void ended(long atNanos, boolean complete) {
        held(sum, sumSinceNanos, atNanos, together);
        for (int backend = 0; backend < level.length; backend++) {
            held(level[backend], sinceNanos[backend], atNanos, !together && backendCounts[backend]);
        }
    }

    @Override
    Reading read() {
        return Reading.of(peak);
    }

    private void moved(long atNanos, int backend, int inFlight) {
        if (together) {
            held(sum, sumSinceNanos, atNanos, true);
            sum += inFlight - level[backend];
            sumSinceNanos = atNanos;
            touch(sum, atNanos);
        } else if (backendCounts[backend]) {
            held(level[backend], sinceNanos[backend], atNanos, true);
            sinceNanos[backend] = atNanos;
            touch(inFlight, atNanos);
        }
        level[backend] = inFlight;
    }

    /** A level held from one instant to another counts if any of that lies in the window. */
    private void held(long count, long fromNanos, long toNanos, boolean counts) {
        if (counts && count > peak && window.overlapNanos(fromNanos, toNanos) > 0) {
            peak = count;
        }
    }

    /** A level reached at an instant counts even if it is left within the same instant. */
    private void touch(long count, long atNanos) {
        if (count > peak && window.holds(atNanos)) {
            peak = count;
        }
    }
}
