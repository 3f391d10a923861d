package steelyard.harness.console;

import java.util.List;
import java.util.Objects;
import steelyard.drills.model.Cue;

/**
 * Which cues of a drill go on at an instant: those that may end, have begun, and neither ended nor were undone or replaced
 * since.
 */
final class InForce {
    private InForce() {}

    /** @param cues by instant */
    static List<Cue> at(long nowNanos, List<Cue> cues) {
        return cues.stream()
                .filter(cue -> cue.kind().canEnd() && cue.atNanos() <= nowNanos && !over(cue, nowNanos, cues))
                .toList();
    }

    private static boolean over(Cue cue, long nowNanos, List<Cue> cues) {
        boolean ended = cue.forNanos() > 0 && cue.atNanos() + cue.forNanos() <= nowNanos;
        return ended
                || cues.subList(cues.indexOf(cue) + 1, cues.size()).stream()
                        .filter(later -> later.atNanos() <= nowNanos)
                        .anyMatch(later -> (undoes(later.kind(), cue.kind()) || replaces(later, cue))
                                && later.target()
                                        .backends()
                                        .containsAll(cue.target().backends()));
    }

    /** A fault that is set again takes the place of the former one; of loads, that on the same gauge. */
    private static boolean replaces(Cue later, Cue cue) {
        return later.kind() == cue.kind()
                && Objects.equals(later.settings().gauge(), cue.settings().gauge());
    }

    private static boolean undoes(Cue.Kind later, Cue.Kind kind) {
        return switch (kind) {
            case KILL -> later == Cue.Kind.REVIVE;
            case SLOW, FAIL, HANG, REFUSE, FAIL_PROBE, FLAP_PROBE, LOAD, FILL -> later == Cue.Kind.HEAL;
            case REVIVE, HEAL, REWEIGH, DRAIN, ADMIT, WITHDRAW, RETUNE, SURGE -> false;
        };
    }
}
