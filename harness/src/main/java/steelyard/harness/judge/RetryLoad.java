package steelyard.harness.judge;

import java.util.Set;

/** {@code retry-load}: attempts picked over requests attempted, which are their first attempts; both by pick time. */
final class RetryLoad extends Meter {
    private final Window window;
    private final boolean[] poolCounts;
    private final Worst worst;

    /**
     * @param poolCounts by pool: whether it is looked at
     * @param worstNanos the worst stretch of that length; 0 for the whole window
     */
    RetryLoad(Window window, boolean[] poolCounts, long worstNanos) {
        this.window = window;
        this.poolCounts = poolCounts;
        this.worst = new Worst(window, worstNanos);
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.PICKS);
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        if (window.holds(atNanos) && poolCounts[pool]) {
            worst.add(atNanos, 1, attempt == 1 ? 1 : 0);
        }
    }

    @Override
    Reading read() {
        double load = worst.greatestRatio();
        return Double.isNaN(load) ? Reading.notMeasured("no request was attempted") : Reading.of(load);
    }
}
