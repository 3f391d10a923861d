package steelyard.drills.read;

import java.util.Comparator;
import java.util.EnumSet;
import java.util.HashSet;
import java.util.List;
import java.util.Set;
import java.util.stream.Stream;
import steelyard.drills.model.Cue;

/** Looks for cues of a drill that can be played but do little of what their words promise. */
final class CueNotices {
    private final Problems problems;
    private final long lastsNanos;

    CueNotices(Problems problems, long lastsNanos) {
        this.problems = problems;
        this.lastsNanos = lastsNanos;
    }

    /** Notes what is odd about cues, each with the place of its draft. */
    void check(List<Placed<Cue>> cues) {
        List<Placed<Cue>> inTime = cues.stream()
                .sorted(Comparator.comparingLong(placed -> placed.value().atNanos()))
                .toList();
        for (Placed<Cue> placed : inTime) {
            checkEnd(placed);
            checkFactor(placed);
        }
        checkUndone(inTime, EnumSet.of(Cue.Kind.KILL), Cue.Kind.REVIVE, "killed");
        checkUndone(inTime, EnumSet.of(Cue.Kind.DRAIN, Cue.Kind.WITHDRAW), Cue.Kind.ADMIT, "drained or withdrawn");
    }

    private void checkEnd(Placed<Cue> placed) {
        Cue cue = placed.value();
        long end = cue.atNanos() + cue.forNanos();
        if (cue.forNanos() > 0 && end > lastsNanos) {
            problems.notice(
                    placed.place(),
                    "'" + cue.name() + "' would end at " + Durations.text(end) + ", after the end of the play",
                    "leave out for, or write at most " + Durations.text(lastsNanos - cue.atNanos()));
        }
    }

    private void checkFactor(Placed<Cue> placed) {
        Cue cue = placed.value();
        if (cue.kind() == Cue.Kind.SURGE && cue.settings().factor() == 0) {
            problems.notice(
                    placed.place(),
                    "a surge with factor 0 silences the traffic to the pool",
                    "write a factor above 0, unless silence is meant");
        }
    }

    /** A cue that undoes others should find something of theirs: something done to each of its backends before. */
    private void checkUndone(List<Placed<Cue>> inTime, Set<Cue.Kind> does, Cue.Kind undoes, String done) {
        Set<String> before = new HashSet<>();
        for (Placed<Cue> placed : inTime) {
            Cue cue = placed.value();
            if (does.contains(cue.kind())) {
                before.addAll(cue.target().backends());
            } else if (cue.kind() == undoes) {
                Stream<String> untouched = cue.target().backends().stream().filter(one -> !before.contains(one));
                untouched
                        .findFirst()
                        .ifPresent(backend -> problems.notice(
                                placed.place(),
                                undoes.word() + " does nothing: '" + backend + "' is not " + done + " before it",
                                "correct its instant or its target, or leave the cue out"));
            }
        }
    }
}
