package steelyard.harness.record;

import steelyard.drills.model.Cue;
import steelyard.harness.record.PlayListener.By;

/** What a cue that was applied is called; the end of its {@code for:} is no second start. */
public final class CueWords {
    private CueWords() {}

    /** {@code brown out}, or {@code brown out ends}. */
    public static String name(Cue cue, By by) {
        return by == By.END ? cue.name() + " ends" : cue.name();
    }

    /** {@code slow fulmar}, or {@code end of slow fulmar}. */
    public static String action(Cue cue, By by) {
        return by == By.END ? "end of " + cue.text() : cue.text();
    }
}
