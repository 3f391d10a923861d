package steelyard.harness.judge;

import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;

/** {@code failed}: requests due in the window without a good answer over requests due; the whole window or its worst stretch. */
final class Failed extends Requests {
    private final Set<Cause> causes;
    private final Worst worst;

    /** @param worstNanos the worst stretch of that length; 0 for the whole window */
    Failed(Window window, boolean[] trafficCounts, Set<Cause> causes, long worstNanos) {
        super(window, trafficCounts);
        this.causes = causes;
        this.worst = new Worst(window, worstNanos);
    }

    @Override
    void count(long dueNanos, long tookNanos, @Nullable Cause cause) {
        worst.add(dueNanos, cause != null && causes.contains(cause) ? 1 : 0, 1);
    }

    @Override
    Reading read() {
        double share = worst.greatestRatio();
        return Double.isNaN(share) ? Reading.notMeasured("no request was due") : Reading.of(share);
    }
}
