package steelyard.harness.tune;

import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;

/**
 * A setting and the values it is to take.
 *
 * @param path of the setting, see {@link DrillText}
 * @param values as a drill writes them, at least one, each once
 */
public record Variation(String path, List<String> values) {
    private static final String EXAMPLE = "write it like probe.every=1s,2s,5s";

    public Variation {
        values = List.copyOf(values);
    }

    /**
     * Reads {@code probe.every=500ms,1s,2s}. Commas inside brackets or braces belong to a value.
     *
     * @throws TuneRefused when it is not of that form
     */
    public static Variation read(String text) throws TuneRefused {
        int equals = text.indexOf('=');
        String path = equals < 0 ? text.strip() : text.substring(0, equals).strip();
        if (equals < 0 || path.isEmpty()) {
            throw new TuneRefused("--vary '" + text + "' names no setting and values; " + EXAMPLE);
        }
        List<String> values = split(text.substring(equals + 1));
        for (String value : values) {
            if (value.isEmpty()) {
                throw new TuneRefused("--vary '" + text + "' has a value with nothing in it; " + EXAMPLE);
            }
        }
        if (new LinkedHashSet<>(values).size() < values.size()) {
            throw new TuneRefused("--vary '" + text + "' has a value twice; keep one of them");
        }
        return new Variation(path, values);
    }

    private static List<String> split(String text) {
        List<String> values = new ArrayList<>();
        int depth = 0;
        int start = 0;
        for (int at = 0; at < text.length(); at++) {
            char c = text.charAt(at);
            if (c == '{' || c == '[') {
                depth++;
            } else if (c == '}' || c == ']') {
                depth--;
            } else if (c == ',' && depth <= 0) {
                values.add(text.substring(start, at).strip());
                start = at + 1;
            }
        }
        values.add(text.substring(start).strip());
        return values;
    }
}
