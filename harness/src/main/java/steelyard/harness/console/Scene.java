package steelyard.harness.console;

import java.util.Comparator;
import java.util.List;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.harness.record.CueWords;
import steelyard.harness.record.PlayBoard;
import steelyard.harness.record.PlayListener.By;

/**
 * What there is to show of a play at one instant.
 *
 * @param title of the drill
 * @param lastsNanos length of the play
 * @param figures the play so far
 * @param inForce cues of the drill that go on now
 * @param next what comes next of the drill, or null after the last
 */
record Scene(
        String title,
        long lastsNanos,
        PlayBoard.Figures figures,
        List<Cue> inForce,
        @Nullable Coming next) {

    /** A cue that is due, or the end of one. */
    record Coming(long atNanos, String text) {}

    static Scene of(Drill drill, PlayBoard.Figures figures) {
        List<Cue> cues = drill.cues();
        Coming next = cues.stream()
                .flatMap(Scene::comings)
                .filter(coming -> coming.atNanos() > figures.atNanos() && coming.atNanos() <= drill.lastsNanos())
                .min(Comparator.comparingLong(Coming::atNanos))
                .orElse(null);
        List<Cue> inForce = figures.ended() ? List.of() : InForce.at(figures.atNanos(), cues);
        return new Scene(drill.name(), drill.lastsNanos(), figures, inForce, next);
    }

    private static Stream<Coming> comings(Cue cue) {
        Coming begins = new Coming(cue.atNanos(), text(cue));
        return cue.forNanos() == 0
                ? Stream.of(begins)
                : Stream.of(begins, new Coming(cue.atNanos() + cue.forNanos(), text(cue, By.END)));
    }

    /** The same of a cue that was applied; the end of one goes by its name: {@code brown out ends}. */
    static String text(Cue cue, By by) {
        return by == By.END ? CueWords.name(cue, by) : text(cue);
    }

    /** What a cue does, with its name where that says more: {@code kill fulmar (fulmar dies)}. */
    static String text(Cue cue) {
        return cue.name().equals(cue.text()) ? cue.text() : cue.text() + " (" + cue.name() + ")";
    }
}
