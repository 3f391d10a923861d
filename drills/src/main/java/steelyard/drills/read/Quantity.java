package steelyard.drills.read;

import java.util.List;
import java.util.function.Predicate;
import org.jspecify.annotations.Nullable;

/**
 * A form that a single value of a drill may take, and what to say when it does not.
 *
 * @param noun what it is, with its article: {@code a duration}
 * @param example how to write it
 * @param units units that a bare number may lack; empty where a bare number is right or means nothing
 * @param words every word that it may be, or empty when it is not one of a list
 * @param parser text to value
 * @param rule what else must hold of the value
 */
record Quantity<T>(
        String noun,
        String example,
        List<String> units,
        List<String> words,
        Parser<T> parser,
        @Nullable Rule<T> rule) {

    /** Text to value, null for a text of another form; throws nothing. */
    interface Parser<T> {
        @Nullable
        T parse(String text);
    }

    /**
     * A bound on a value.
     *
     * @param broken follows the quoted value in a message: {@code is not above zero}
     */
    record Rule<T>(Predicate<T> holds, String broken, String remedy) {}

    static <T> Quantity<T> of(String noun, String example, Parser<T> parser) {
        return new Quantity<>(noun, example, List.of(), List.of(), parser, null);
    }

    Quantity<T> withUnits(List<String> left) {
        return new Quantity<>(noun, example, left, words, parser, rule);
    }

    Quantity<T> that(Predicate<T> holds, String broken, String remedy) {
        return new Quantity<>(noun, example, units, words, parser, new Rule<>(holds, broken, remedy));
    }

    /** The value of a scalar, or null when a problem was noted; {@code key} is what the message calls it. */
    @Nullable
    T read(Node node, String key, Problems problems) {
        if (!(node instanceof Node.Scalar scalar)) {
            problems.add(node.place(), "'" + key + "' is " + node.noun() + ", not " + noun, written());
            return null;
        }
        if (scalar.empty()) {
            problems.add(scalar.place(), "'" + key + "' has no value", written());
            return null;
        }
        return parse(new Placed<>(scalar.place(), scalar.text()), key, problems);
    }

    @Nullable
    T parse(Placed<String> text, String key, Problems problems) {
        String trimmed = text.value().strip();
        T value = parser.parse(trimmed);
        if (value == null) {
            problems.add(text.place(), complaint(trimmed, key), remedy(trimmed));
        } else if (rule != null && !rule.holds().test(value)) {
            problems.add(text.place(), quoted(trimmed) + " for '" + key + "' " + rule.broken(), rule.remedy());
            return null;
        }
        return value;
    }

    private String complaint(String text, String key) {
        return !units.isEmpty() && Numbers.isNumber(text)
                ? quoted(text) + " for '" + key + "' has no unit"
                : quoted(text) + " for '" + key + "' is not " + noun;
    }

    /** What to do about a text that has not this form: add a unit, or write it another way. */
    String remedy(String text) {
        if (!units.isEmpty() && Numbers.isNumber(text)) {
            List<String> forms = units.stream().map(unit -> text + unit).toList();
            return "write " + Sentence.or(forms);
        }
        return words.isEmpty() ? written() : NearWord.remedy(text, words, "write " + Sentence.or(words));
    }

    /** One way to write it, or each of its words. */
    String instance() {
        int end = example.indexOf(',');
        return !words.isEmpty() ? Sentence.or(words) : end < 0 ? example : example.substring(0, end);
    }

    private String written() {
        return words.isEmpty() ? "write it like " + example : "write " + Sentence.or(words);
    }

    static String quoted(String text) {
        return text.length() > 60 ? "'" + text.substring(0, 57) + "...'" : "'" + text + "'";
    }
}
