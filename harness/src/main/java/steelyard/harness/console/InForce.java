package steelyard.harness.console;

import java.util.List;
import steelyard.drills.model.Cue;

/** Which cues of a drill go on at an instant: those that may end, have begun, and neither ended nor were undone since. */
final class InForce {
    private InForce() {}

    static List<Cue> at(long nowNanos, List<Cue> cues) {
        return cues.stream()
                .filter(cue -> cue.kind().canEnd() && cue.atNanos() <= nowNanos && !over(cue, nowNanos, cues))
                .toList();
    }

    private static boolean over(Cue cue, long nowNanos, List<Cue> cues) {
        boolean ended = cue.forNanos() > 0 && cue.atNanos() + cue.forNanos() <= nowNanos;
        return ended
                || cues.stream()
                        .filter(later -> later.atNanos() >= cue.atNanos() && later.atNanos() <= nowNanos)
                        .anyMatch(later -> undoes(later.kind(), cue.kind())
                                && later.target()
                                        .backends()
                                        .containsAll(cue.target().backends()));
    }

    private static boolean undoes(Cue.Kind later, Cue.Kind kind) {
        return switch (kind) {
            case KILL -> later == Cue.Kind.REVIVE;
            case SLOW, FAIL, HANG, REFUSE, FAIL_PROBE, FLAP_PROBE, LOAD, FILL -> later == Cue.Kind.HEAL;
            case REVIVE, HEAL, REWEIGH, DRAIN, ADMIT, WITHDRAW, RETUNE, SURGE -> false;
        };
    }
}
