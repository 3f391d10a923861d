package steelyard.harness.tune;

import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.stream.Collectors;
import steelyard.drills.model.Drill;

/**
 * One place of the grid: a drill with one value for each of the varied settings.
 *
 * @param number from 1, in the order of the grid
 * @param values by path, in the order of the variations
 * @param text of the drill with these values
 * @param drill read from it
 */
public record Cell(int number, Map<String, String> values, String text, Drill drill) {
    public Cell {
        values = Collections.unmodifiableMap(new LinkedHashMap<>(values));
    }

    /** {@code probe.every 1s, probe.misses 3}. */
    public String words() {
        return words(values);
    }

    static String words(Map<String, String> values) {
        return values.entrySet().stream()
                .map(each -> each.getKey() + " " + each.getValue())
                .collect(Collectors.joining(", "));
    }
}
