package steelyard.harness.console;

import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.harness.record.PlayBoard;

/**
 * What there is to show of a play at one instant.
 *
 * @param title of the drill
 * @param lastsNanos length of the play
 * @param figures the play so far
 * @param next the cue of the drill that comes next, or null after the last
 */
record Scene(
        String title,
        long lastsNanos,
        PlayBoard.Figures figures,
        @Nullable Cue next) {

    static Scene of(Drill drill, PlayBoard.Figures figures) {
        List<Cue> cues = drill.cues();
        Cue next = cues.stream()
                .filter(cue -> cue.atNanos() > figures.atNanos())
                .findFirst()
                .orElse(null);
        return new Scene(drill.name(), drill.lastsNanos(), figures, next);
    }

    /** What a cue does, with its name where that says more: {@code kill fulmar (fulmar dies)}. */
    static String text(Cue cue) {
        return cue.name().equals(cue.text()) ? cue.text() : cue.text() + " (" + cue.name() + ")";
    }
}
