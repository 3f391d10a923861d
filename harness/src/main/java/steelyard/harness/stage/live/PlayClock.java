package steelyard.harness.stage.live;

/**
 * The clock of a live play, and the only reader of {@link System#nanoTime} in the main code.
 *
 * <p>Balancer and backends are given {@link #nanos}, which never goes back and has no particular origin; what they tell
 * is turned into play time here. Any thread.
 */
final class PlayClock {
    private volatile long zeroNanos;

    PlayClock() {
        zeroNanos = nanos();
    }

    /** Elapsed time from an arbitrary origin. */
    long nanos() {
        return System.nanoTime();
    }

    /** Play time 0 is {@code leadNanos} from now. Returns that instant, as {@link #nanos} will show it. */
    long begin(long leadNanos) {
        zeroNanos = nanos() + leadNanos;
        return zeroNanos;
    }

    /** Play time of an instant of {@link #nanos}; below 0 before the play. */
    long playNanos(long nanos) {
        return nanos - zeroNanos;
    }

    /** Play time now. */
    long playNow() {
        return playNanos(nanos());
    }
}
