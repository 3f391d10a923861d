package steelyard.harness.judge;

import steelyard.harness.record.Cast;

/** Attempts picked in one window, by backend and by pool. Shared by every meter of that window. */
final class WindowPicks {
    private final Window window;
    private final long[] ofBackend;
    private final long[] ofPool;

    WindowPicks(Window window, Cast cast) {
        this.window = window;
        ofBackend = new long[cast.backends().size()];
        ofPool = new long[cast.pools().size()];
    }

    Window window() {
        return window;
    }

    void picked(long atNanos, int pool, int backend) {
        if (window.holds(atNanos)) {
            ofBackend[backend]++;
            ofPool[pool]++;
        }
    }

    long ofBackend(int backend) {
        return ofBackend[backend];
    }

    long ofPool(int pool) {
        return ofPool[pool];
    }
}
