package steelyard.harness.judge;

import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;

/**
 * Base of the meters of requests: those due in the window that go to the pool looked at. A request is counted when it
 * ends, by its due time, since by then everything is known about it.
 */
abstract class Requests extends Meter {
    private final Window window;
    private final boolean[] trafficCounts;

    /** @param trafficCounts by traffic stream: whether its requests are looked at */
    Requests(Window window, boolean[] trafficCounts) {
        this.window = window;
        this.trafficCounts = trafficCounts;
    }

    @Override
    final Set<Hears> hears() {
        return Set.of(Hears.REQUESTS);
    }

    @Override
    public final void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        if (window.holds(dueNanos) && trafficCounts[traffic]) {
            count(dueNanos, atNanos - dueNanos, cause);
        }
    }

    final Window window() {
        return window;
    }

    /** A request that counts has ended, well where {@code cause} is null. */
    abstract void count(long dueNanos, long tookNanos, @Nullable Cause cause);
}
