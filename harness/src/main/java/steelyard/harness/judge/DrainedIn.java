package steelyard.harness.judge;

import java.util.Set;
import steelyard.balancer.core.decide.Outcome;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Wording;

/**
 * {@code drained-in}: from the drain cue to the last end of an attempt on the member, before its next cue; 0 if nothing
 * was in flight. Never, if something still is when its time is over.
 */
final class DrainedIn extends SinceCue {
    private final int[] inFlight;
    private final long[] lastEndNanos;
    private final int[] left;

    DrainedIn(String after, int[] members, Cast cast) {
        super(after, members, cast);
        inFlight = new int[cast.backends().size()];
        lastEndNanos = new long[members.length];
        left = new int[members.length];
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.CUES, Hears.PICKS, Hears.ATTEMPT_ENDS);
    }

    @Override
    void begin() {}

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        this.inFlight[backend] = inFlight;
    }

    @Override
    public void attemptEnded(
            long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        this.inFlight[backend] = inFlight;
        int member = running(backend);
        if (member >= 0) {
            lastEndNanos[member] = since(atNanos);
        }
    }

    @Override
    void close(int member, long atNanos) {
        left[member] = inFlight[backend(member)];
    }

    @Override
    Reading member(int member) {
        return left[member] == 0
                ? Reading.of(lastEndNanos[member])
                : Reading.never(name(member) + " still had " + Wording.count(left[member], "attempt", "attempts")
                        + " in flight at its next cue or the end");
    }
}
