package steelyard.drills.read;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Retune;

/** Reads {@code probe:} of a pool, and what a retune changes of it. */
final class ProbeReader {
    private static final Quantity<Probe.Kind> KIND = Words.of("a kind of probe", Probe.Kind.values());
    private static final Quantity<Integer> IN_A_ROW = Numbers.from(1, 1_000);
    private static final long WITHIN = 400 * Durations.MILLISECOND;

    private final Problems problems;

    ProbeReader(Problems problems) {
        this.problems = problems;
    }

    Probe read(Fields fields) {
        Probe.Kind kind = fields.read("kind", KIND, Probe.Kind.HTTP);
        String path = null;
        if (kind == Probe.Kind.HTTP) {
            path = fields.need("path", Paths.PATH, "/");
        } else if (fields.has("path")) {
            problems.add(
                    fields.keyPlace("path"), "a tcp probe asks for no path", "leave out path, or write kind: http");
        }
        long every = fields.read("every", Durations.PERIOD, Durations.SECOND);
        long within = fields.read("within", Durations.POSITIVE, WITHIN);
        noticeLate(fields, "a probe", every, within);
        return new Probe(
                kind,
                path,
                every,
                within,
                fields.read("misses", IN_A_ROW, 3),
                fields.read("passes", IN_A_ROW, 2),
                fields.read("jitter", Shares.BELOW_WHOLE, 0.0));
    }

    /** Notes when an answer may come after the next one is due. */
    void noticeLate(Fields fields, String what, long every, long within) {
        if (within > every) {
            String later = what.substring(what.indexOf(' ') + 1);
            problems.notice(
                    fields.keyPlace(fields.has("within") ? "within" : "every"),
                    what + " may take " + Durations.text(within) + ", longer than from one to the next: a late answer"
                            + " delays the next " + later,
                    "write a within of at most " + Durations.text(every));
        }
    }

    /** What changes; null when nothing was said, which is noted. */
    Retune.@Nullable ProbeChange change(Fields fields) {
        if (fields.given().isEmpty()) {
            if (!fields.odd()) {
                problems.add(fields.place(), "the change of probes changes nothing", "write one, such as every: 500ms");
            }
            return null;
        }
        Long every = fields.read("every", Durations.PERIOD);
        Long within = fields.read("within", Durations.POSITIVE);
        Integer misses = fields.read("misses", IN_A_ROW);
        Integer passes = fields.read("passes", IN_A_ROW);
        Double jitter = fields.read("jitter", Shares.BELOW_WHOLE);
        boolean any = every != null || within != null || misses != null || passes != null || jitter != null;
        return any ? new Retune.ProbeChange(every, within, misses, passes, jitter) : null;
    }
}
