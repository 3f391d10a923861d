package steelyard.drills.read;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cue;

/**
 * A cue as the file says it; what could not be read is null, and was noted.
 *
 * @param name its {@code as:}
 * @param times how often it is played, {@code everyNanos} apart
 */
record CueDraft(
        Place place,
        @Nullable Placed<String> name,
        @Nullable Instant at,
        Cue.@Nullable Kind kind,
        @Nullable TargetDraft target,
        Cue.Settings settings,
        long forNanos,
        int times,
        long everyNanos) {

    /** The name of a repeat: the first keeps the name, the others are numbered. */
    static String repeat(String name, int index) {
        return index == 0 ? name : name + " " + (index + 1);
    }
}
