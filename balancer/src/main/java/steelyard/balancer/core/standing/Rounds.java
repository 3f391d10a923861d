package steelyard.balancer.core.standing;

/**
 * When something that is asked again and again is asked next: a period after the last time it was, or when that ended if
 * that is later; never twice at once. What an answer says, and how long to wait for one, is the asker's. Not thread-safe;
 * any clock origin.
 */
public final class Rounds {
    private boolean running;
    private long number = -1;
    private long startedNanos;
    private long nextNanos;

    /** @param firstStartNanos when the first round starts */
    public Rounds(long firstStartNanos) {
        nextNanos = firstStartNanos;
    }

    public boolean running() {
        return running;
    }

    /** The number of the round that runs or ran last, from 0; -1 before the first. */
    public long number() {
        return number;
    }

    /** Whether that round is the one that runs. */
    public boolean runs(long round) {
        return running && round == number;
    }

    /** When the running round is over without an answer, or else when the next one starts. */
    public long deadlineNanos(long withinNanos) {
        return running ? startedNanos + withinNanos : nextNanos;
    }

    /** Whether an answer to the running round comes early enough; one at exactly the limit does not. */
    public boolean early(long withinNanos, long nowNanos) {
        return nowNanos - (startedNanos + withinNanos) < 0;
    }

    /** Starts the next round. */
    public void start(long nowNanos) {
        running = true;
        number++;
        startedNanos = nowNanos;
    }

    /** Ends the running round; the next one starts that long after it did, or now. */
    public void end(long periodNanos, long nowNanos) {
        running = false;
        after(periodNanos, nowNanos);
    }

    /** Whether one round is over and the next not yet started. */
    public boolean betweenTwo() {
        return !running && number >= 0;
    }

    /** The next round starts that long after the last one did, or now; only {@link #betweenTwo}. */
    public void respace(long periodNanos, long nowNanos) {
        after(periodNanos, nowNanos);
    }

    private void after(long periodNanos, long nowNanos) {
        long next = startedNanos + periodNanos;
        nextNanos = next - nowNanos >= 0 ? next : nowNanos;
    }
}
