package steelyard.harness.compare;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import java.util.TreeMap;
import steelyard.drills.model.Measure;

/**
 * Two sides put beside each other: what differs in their settings, and each measure that both have.
 *
 * <p>A measure is better or worse when it moved by more than the margin and by more than chance explains. With dozens of
 * measures some would seem to by chance alone, so the intervals are wide enough to hold for all of them together with
 * 95 %: each misses in 5 % divided by their number (Bonferroni).
 *
 * @param settings that differ
 * @param lines of the measures that both sides have, expectations first
 * @param missing measures that one side alone has, in words
 * @param margin as a part of the first side's value
 * @param errorRate how often a single interval may miss
 */
public record Comparison(
        Runs first,
        Runs second,
        List<SettingChange> settings,
        List<Line> lines,
        List<String> missing,
        double margin,
        double errorRate) {

    /** The margin where nothing is said. */
    public static final double USUAL_MARGIN = 0.05;

    public Comparison {
        settings = List.copyOf(settings);
        lines = List.copyOf(lines);
        missing = List.copyOf(missing);
    }

    /**
     * Compares.
     *
     * @param margin a smaller change, as a part of the first side's value, is no change; at least 0
     * @param only these measures; all of them when empty
     * @throws CannotCompare for runs of two drills: what differs then are not the settings of one
     */
    public static Comparison of(Runs first, Runs second, double margin, Set<Measure> only) throws CannotCompare {
        if (!first.first().drill().equals(second.first().drill())) {
            throw CannotCompare.misnamed(second.path() + " is of the drill '"
                    + second.first().drill() + "', " + first.path() + " of '"
                    + first.first().drill() + "'; name two runs of one drill, under one title");
        }
        List<Sample> before = samples(first, only);
        Map<String, Sample> after = new TreeMap<>();
        samples(second, only).forEach(each -> after.putIfAbsent(key(each), each));
        List<Sample[]> pairs = new ArrayList<>();
        List<String> missing = new ArrayList<>();
        for (Sample each : before) {
            Optional<Sample> other = Optional.ofNullable(after.remove(key(each)));
            other.ifPresentOrElse(
                    found -> pairs.add(new Sample[] {each, found}),
                    () -> missing.add(each.row().text() + ": only in the first"));
        }
        after.values().forEach(each -> missing.add(each.row().text() + ": only in the second"));
        double errorRate = Difference.ERROR_RATE / Math.max(1, pairs.size());
        Contrast contrast = new Contrast(first, second, margin, errorRate);
        List<Line> lines =
                pairs.stream().map(pair -> contrast.line(pair[0], pair[1])).toList();
        return new Comparison(first, second, SettingChange.between(first, second), lines, missing, margin, errorRate);
    }

    private static List<Sample> samples(Runs runs, Set<Measure> only) {
        return runs.samples().stream()
                .filter(each -> only.isEmpty() || only.contains(each.measure()))
                .toList();
    }

    private static String key(Sample sample) {
        return sample.row().text();
    }

    /** Whether a measure is worse beyond the margin and beyond chance. */
    public boolean worse() {
        return lines.stream().anyMatch(each -> each.word() == Word.WORSE);
    }

    /** How many measures have that word. */
    public long count(Word word) {
        return lines.stream().filter(each -> each.word() == word).count();
    }
}
