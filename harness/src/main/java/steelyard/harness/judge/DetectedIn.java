package steelyard.harness.judge;

import java.util.Arrays;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Standing;
import steelyard.harness.record.Cast;

/**
 * {@code detected-in}: from the cue to the first change from pickable to not, or to the standing that is waited for, of
 * the last member.
 */
final class DetectedIn extends SinceCue {
    private final @Nullable Standing until;
    private final long[] foundNanos;
    /** The latest change, by backend: another cue of the same instant may have brought it about just before. */
    private final long[] latestNanos;

    private final boolean[] holds;

    DetectedIn(String after, int[] members, Cast cast, @Nullable Standing until) {
        super(after, members, cast);
        this.until = until;
        foundNanos = new long[members.length];
        Arrays.fill(foundNanos, -1);
        latestNanos = new long[cast.backends().size()];
        holds = new boolean[cast.backends().size()];
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.CUES, Hears.STANDINGS);
    }

    @Override
    void begin() {
        for (int member = 0; member < members(); member++) {
            int backend = backend(member);
            if (holds[backend] && latestNanos[backend] >= dueNanos()) {
                foundNanos[member] = 0;
            }
        }
    }

    @Override
    public void stood(Transition transition) {
        boolean counts = counts(transition);
        holds[transition.backend()] = counts;
        latestNanos[transition.backend()] = transition.atNanos();
        int member = running(transition.backend());
        if (member >= 0 && counts && foundNanos[member] < 0) {
            foundNanos[member] = since(transition.atNanos());
        }
    }

    @Override
    void close(int member, long atNanos) {}

    @Override
    Reading member(int member) {
        if (foundNanos[member] >= 0) {
            return Reading.of(foundNanos[member]);
        }
        String what = until == null ? "never stopped being picked from" : "never stood " + until.word();
        return Reading.never(name(member) + " " + what + " before its next cue");
    }

    private boolean counts(Transition transition) {
        return until == null
                ? transition.from().pickable() && !transition.to().pickable()
                : transition.to().name().equals(until.name());
    }
}
