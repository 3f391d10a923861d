package steelyard.harness.judge;

import java.util.Set;
import steelyard.balancer.core.decide.Outcome;

/** {@code cut}: attempts on the target, taken together, that were cut in the window. */
final class Cut extends Meter {
    private final Window window;
    private final boolean[] backendCounts;
    private long cut;

    Cut(Window window, boolean[] backendCounts) {
        this.window = window;
        this.backendCounts = backendCounts;
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.ATTEMPT_ENDS);
    }

    @Override
    public void attemptEnded(
            long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        if (outcome == Outcome.CUT && backendCounts[backend] && window.holds(atNanos)) {
            cut++;
        }
    }

    @Override
    Reading read() {
        return Reading.of(cut);
    }
}
