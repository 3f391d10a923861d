package steelyard.bench;

import java.util.Arrays;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;

/**
 * Plain counts of a play, kept beside the judge's own and compared with them at the end. Told by the stage's account;
 * {@link #offered}, {@link #failed} and {@link #cues} may be read by any thread meanwhile.
 */
final class SoakCounts implements PlayListener {
    private final int[] inFlight;
    private volatile long offered;
    private volatile long failed;
    private volatile long cues;
    private long good;
    private long picked;
    private long ended;
    private long answered;
    private long received;
    private long left;

    SoakCounts(Cast cast) {
        inFlight = new int[cast.backends().size()];
    }

    @Override
    @SuppressWarnings("NonAtomicVolatileUpdate") // one thread tells; others only read
    public void requestDue(long atNanos, long request, int traffic, int kind, int client) {
        offered++;
    }

    @Override
    @SuppressWarnings("NonAtomicVolatileUpdate") // as above
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        if (cause == null) {
            good++;
        } else {
            failed++;
        }
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        picked++;
        this.inFlight[backend] = inFlight;
    }

    @Override
    public void attemptEnded(
            long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        ended++;
        answered += outcome == Outcome.ANSWERED ? 1 : 0;
        this.inFlight[backend] = inFlight;
    }

    @Override
    public void backendReceived(long atNanos, int backend, long request, int attempt) {
        received++;
    }

    @Override
    public void backendEnded(long atNanos, int backend, long request, int attempt, boolean inFull, int status) {
        left++;
    }

    @Override
    @SuppressWarnings("NonAtomicVolatileUpdate") // as above
    public void cueApplied(long atNanos, long dueNanos, Cue cue, By by) {
        cues++;
    }

    long offered() {
        return offered;
    }

    long failed() {
        return failed;
    }

    long cues() {
        return cues;
    }

    /** At the end: every request ended once, every attempt too on both sides, and nothing is in flight. */
    boolean balanced() {
        return offered == good + failed
                && picked == ended
                && received == left
                && received >= answered
                && received <= picked
                && Arrays.stream(inFlight).sum() == 0;
    }

    String text() {
        return "%d offered, %d good, %d failed; %d picked, %d ended, %d of them answered; %d read and %d done with by the backends; %d in flight"
                .formatted(
                        offered,
                        good,
                        failed,
                        picked,
                        ended,
                        answered,
                        received,
                        left,
                        Arrays.stream(inFlight).sum());
    }
}
