package steelyard.drills.read;

import java.util.ArrayList;
import java.util.List;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Retune;

/**
 * Weights that differ in pools whose method takes no account of them: worth a notice, unless a cue changes the pool to a
 * method that weighs. So it waits until the cues are known.
 */
final class UnusedWeights {
    private final Problems problems;
    private final List<Found> found = new ArrayList<>();

    UnusedWeights(Problems problems) {
        this.problems = problems;
    }

    /** The pool has such weights, the first of them at that place. */
    void found(String pool, Pool.Method method, Place place) {
        found.add(new Found(pool, method, place));
    }

    /** Notes those that none of the drill's cues brings into play. */
    void check(List<Cue> cues) {
        for (Found each : found) {
            if (cues.stream().noneMatch(cue -> bringsIntoPlay(cue, each.pool()))) {
                notice(each);
            }
        }
    }

    private static boolean bringsIntoPlay(Cue cue, String pool) {
        Retune retune = cue.settings().retune();
        Pool.Method method = retune == null ? null : retune.method();
        return method != null && method.weighs() && cue.target().name().equals(pool);
    }

    private void notice(Found each) {
        Pool.Method weighs =
                each.method() == Pool.Method.RANDOM ? Pool.Method.WEIGHTED_RANDOM : Pool.Method.WEIGHTED_ROUND_ROBIN;
        problems.notice(
                each.place(),
                "under " + each.method().word() + " weights play no part",
                "write method: " + weighs.word() + " to use them");
    }

    private record Found(String pool, Pool.Method method, Place place) {}
}
