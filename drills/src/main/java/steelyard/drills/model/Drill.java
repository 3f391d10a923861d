package steelyard.drills.model;

import java.util.List;
import java.util.Objects;
import java.util.Optional;

/**
 * One drill: what stands on the stage, what traffic arrives, what goes wrong and when, and what must still hold.
 *
 * @param name the title, as people say it
 * @param about what the drill is about and what a person should look for
 * @param stage hosts, pools and backends
 * @param traffic at least one stream of requests
 * @param lastsNanos length of the play, above zero
 * @param cues in order of their instant; those of one instant in the order of the file
 * @param expectations in the order of the file; may be empty
 */
public record Drill(
        String name,
        String about,
        Stage stage,
        List<Traffic> traffic,
        long lastsNanos,
        List<Cue> cues,
        List<Expectation> expectations) {

    public Drill {
        Objects.requireNonNull(name);
        Objects.requireNonNull(about);
        Objects.requireNonNull(stage);
        traffic = List.copyOf(traffic);
        cues = List.copyOf(cues);
        expectations = List.copyOf(expectations);
        Check.that(lastsNanos > 0, "a play lasts longer than nothing, not %d ns", lastsNanos);
        Check.that(!traffic.isEmpty(), "a drill needs traffic");
    }

    /** The cue of that name (its {@code as:}), if there is one. */
    public Optional<Cue> cue(String cueName) {
        return cues.stream().filter(cue -> cue.name().equals(cueName)).findFirst();
    }
}
