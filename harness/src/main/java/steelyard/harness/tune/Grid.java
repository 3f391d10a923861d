package steelyard.harness.tune;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.drills.read.Problem;

/**
 * All combinations of the values of the varied settings, the last setting changing fastest.
 *
 * @param variations at least one
 * @param cells each with its drill
 */
public record Grid(List<Variation> variations, List<Cell> cells) {
    /** More than that is a mistake sooner than a wish. */
    public static final int MOST_CELLS = 10_000;

    public Grid {
        variations = List.copyOf(variations);
        cells = List.copyOf(cells);
    }

    /**
     * Makes every cell's drill and reads it as any drill is read.
     *
     * @param name of the drill, for messages
     * @param text of a drill that was read without problems
     * @throws TuneRefused when a path leads nowhere, or the reader refuses a value: with the cell's values and the place
     */
    public static Grid of(String name, String text, List<Variation> variations) throws TuneRefused {
        return of(name, text, null, variations);
    }

    /** The same for a drill that names files, which begin at its folder; null for a drill in none. */
    public static Grid of(String name, String text, @Nullable Path folder, List<Variation> variations)
            throws TuneRefused {
        checkPaths(variations);
        List<Map<String, String>> combinations = combinations(variations);
        List<Cell> cells = new ArrayList<>();
        for (Map<String, String> values : combinations) {
            String changed = text;
            for (Map.Entry<String, String> each : values.entrySet()) {
                changed = new DrillText(changed).with(each.getKey(), each.getValue());
            }
            cells.add(new Cell(cells.size() + 1, values, changed, read(name, changed, folder, values)));
        }
        return new Grid(variations, cells);
    }

    private static void checkPaths(List<Variation> variations) throws TuneRefused {
        Set<String> paths = new LinkedHashSet<>();
        long cells = 1;
        for (Variation each : variations) {
            if (!paths.add(each.path())) {
                throw new TuneRefused("--vary names '" + each.path() + "' twice; give all its values at once");
            }
            cells = Math.min(cells * each.values().size(), Long.MAX_VALUE / 100_000);
        }
        if (cells > MOST_CELLS) {
            throw new TuneRefused("the grid has more than " + MOST_CELLS + " cells; vary less at a time");
        }
    }

    private static List<Map<String, String>> combinations(List<Variation> variations) {
        List<Map<String, String>> all = List.of(Map.of());
        for (Variation variation : variations) {
            List<Map<String, String>> longer = new ArrayList<>();
            for (Map<String, String> begun : all) {
                for (String value : variation.values()) {
                    Map<String, String> values = new LinkedHashMap<>(begun);
                    values.put(variation.path(), value);
                    longer.add(values);
                }
            }
            all = longer;
        }
        return all;
    }

    private static Drill read(String name, String text, @Nullable Path folder, Map<String, String> values)
            throws TuneRefused {
        Parsed<Drill> parsed = folder == null ? DrillReader.read(name, text) : DrillReader.read(name, text, folder);
        if (parsed.value().isPresent()) {
            return parsed.value().get();
        }
        Problem first = parsed.problems().stream()
                .filter(each -> each.severity() == Problem.Severity.PROBLEM)
                .findFirst()
                .orElseThrow();
        throw new TuneRefused("with " + Cell.words(values) + ": " + first);
    }
}
