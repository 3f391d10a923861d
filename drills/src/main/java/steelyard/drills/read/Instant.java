package steelyard.drills.read;

import java.util.regex.Pattern;
import org.jspecify.annotations.Nullable;

/**
 * A time of the play as the file says it.
 *
 * @param base the name of a cue, or null for the start of the play
 * @param offsetNanos from there on, perhaps negative
 */
record Instant(Place place, @Nullable String base, long offsetNanos) {

    /** Just before each sign. */
    private static final Pattern SIGNED = Pattern.compile("(?=[+-])");

    private static final Quantity<String> TEXT = Names.some("an instant", "15s, or the name of a cue and perhaps + 2s");

    /** Reads {@code 15s}, {@code fulmar dies}, {@code fulmar dies + 2s} or {@code fulmar dies - 100ms}; null when noted. */
    static @Nullable Instant read(Fields fields, String key) {
        Node node = fields.node(key);
        String text = fields.read(key, TEXT);
        if (node == null || text == null || fields.problems().meansRefusedName(text.strip())) {
            return null;
        }
        return parse(new Placed<>(node.place(), text), key, fields.problems());
    }

    private static @Nullable Instant parse(Placed<String> text, String key, Problems problems) {
        String written = text.value();
        int sign = Math.max(written.lastIndexOf('+'), written.lastIndexOf('-'));
        if (sign < 0) {
            return looksLikeNumber(written)
                    ? at(text, null, 1, Durations.DURATION.parse(text, key, problems))
                    : new Instant(text.place(), written, 0);
        }
        String base = written.substring(0, sign).strip();
        String once = inOne(written);
        if (once != null) {
            problems.add(
                    text.place(),
                    "an instant takes one duration, and " + Quantity.quoted(written) + " for '" + key + "' has more",
                    "write " + once);
            return null;
        }
        Placed<String> rest =
                new Placed<>(text.place(), written.substring(sign + 1).strip());
        int direction = written.charAt(sign) == '-' ? -1 : 1;
        return at(text, base.isEmpty() ? null : base, direction, Durations.DURATION.parse(rest, key, problems));
    }

    /** The same with one duration, of a text with several; null for any other text. */
    private static @Nullable String inOne(String written) {
        String[] parts = SIGNED.split(written);
        String first = parts[0].strip();
        boolean named = !looksLikeNumber(first);
        Long sum = sum(parts, named ? 1 : 0);
        if (parts.length < (named ? 3 : 2) || sum == null) {
            return null;
        }
        String amount = Durations.exact(Math.abs(sum));
        return named ? first + (sum < 0 ? " - " : " + ") + amount : sum < 0 ? null : amount;
    }

    /** Of durations, each but the very first part with its sign; null when one is none. */
    private static @Nullable Long sum(String[] parts, int from) {
        long sum = 0;
        for (int part = from; part < parts.length; part++) {
            String text = parts[part].strip();
            Long nanos = Durations.nanos(part == 0 ? text : text.substring(1).strip());
            if (nanos == null) {
                return null;
            }
            sum += text.startsWith("-") ? -nanos : nanos;
        }
        return sum;
    }

    private static @Nullable Instant at(
            Placed<String> text, @Nullable String base, int direction, @Nullable Long offset) {
        return offset == null ? null : new Instant(text.place(), base, direction * offset);
    }

    /** A text that begins like a number is meant as a duration, so that {@code 15} is told its unit. */
    static boolean looksLikeNumber(String text) {
        char c = text.charAt(0);
        return c == '.' || (c >= '0' && c <= '9');
    }
}
