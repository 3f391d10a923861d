package steelyard.harness.cli;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.compare.Comparison;
import steelyard.harness.compare.Difference;
import steelyard.harness.compare.Line;
import steelyard.harness.compare.Word;
import steelyard.harness.record.Wording;
import steelyard.harness.tune.TuneWords;

/** A comparison as a person reads it: in a sentence, the settings that differ, then each measure. */
final class CompareText {
    private static final double NANOS = 1e9;
    /** A setting's value shows so much of itself at least. */
    private static final int LEAST_VALUE = 16;
    /** A setting's value shows so much of itself where lines have no end. */
    private static final int MOST_VALUE = 60;

    private CompareText() {}

    /** @param width a table wider than that is written one row after the other */
    static List<String> lines(Comparison comparison, int width) {
        List<String> lines = new ArrayList<>();
        lines.add(sentence(comparison));
        lines.add("");
        lines.add("first   " + comparison.first().words() + ", "
                + comparison.first().path());
        lines.add("second  " + comparison.second().words() + ", "
                + comparison.second().path());
        lines.add("");
        settings(comparison, lines, width);
        lines.add("");
        if (comparison.lines().isEmpty()) {
            lines.add("There is no measure that both have.");
        } else {
            measures(comparison, lines, width);
        }
        comparison.missing().forEach(lines::add);
        return lines;
    }

    private static String sentence(Comparison comparison) {
        List<String> counts = new ArrayList<>();
        for (Word word : Word.values()) {
            long count = comparison.count(word);
            if (count > 0) {
                counts.add(count + " " + word.text());
            }
        }
        String of = "of " + Wording.count(comparison.lines().size(), "measure", "measures") + ": ";
        return (comparison.worse() ? "Worse: " : "Not worse: ") + of
                + (counts.isEmpty() ? "none" : String.join(", ", counts)) + ".";
    }

    private static void settings(Comparison comparison, List<String> lines, int width) {
        if (comparison.settings().isEmpty()) {
            lines.add("No setting differs.");
            return;
        }
        int paths = comparison.settings().stream()
                .mapToInt(each -> each.setting().length())
                .max()
                .orElse(0);
        int most = Math.max(LEAST_VALUE, Math.min(MOST_VALUE, (width - paths) / 2 - 2));
        List<List<String>> rows = comparison.settings().stream()
                .map(each -> List.of(each.setting(), cut(each.first(), most), cut(each.second(), most)))
                .toList();
        lines.addAll(TextTable.lines(List.of("setting", "first", "second"), rows, width));
    }

    /** On one line, and no longer than that. */
    private static String cut(String value, int most) {
        String line = value.replaceAll("\\s+", " ");
        return line.length() <= most ? line : line.substring(0, most - 3) + "...";
    }

    private static void measures(Comparison comparison, List<String> lines, int width) {
        List<List<String>> rows =
                comparison.lines().stream().map(CompareText::row).toList();
        lines.addAll(TextTable.lines(List.of("measure", "first", "second", "difference", "interval", ""), rows, width));
        lines.add("");
        for (Line each : comparison.lines()) {
            if (each.note() != null) {
                lines.add("note on " + each.text() + ": " + each.note());
            }
        }
        List<String> methods = comparison.lines().stream()
                .map(Line::difference)
                .filter(each -> each != null)
                .map(each -> each.method().words())
                .distinct()
                .toList();
        if (!methods.isEmpty()) {
            lines.add("Means; " + String.join("; ", methods) + ". Margin "
                    + Wording.value(Unit.SHARE, comparison.margin())
                    + ". Intervals hold for all measures together with "
                    + "95 %, each by itself with " + Wording.value(Unit.SHARE, 1 - comparison.errorRate())
                    + "; a band is always that of 95 %.");
        }
    }

    private static List<String> row(Line line) {
        Difference difference = line.difference();
        String size = difference == null ? "" : signed(line, difference.size());
        String interval =
                difference == null ? "" : signed(line, difference.low()) + " to " + signed(line, difference.high());
        return List.of(
                line.text(),
                value(line, line.first()),
                value(line, line.second()),
                size,
                interval,
                line.word().text());
    }

    private static String value(Line line, double value) {
        Unit unit = Unit.valueOf(line.unit().toUpperCase(Locale.ROOT));
        return TuneWords.value(unit, unit == Unit.DURATION ? value * NANOS : value);
    }

    private static String signed(Line line, double value) {
        String words = value(line, value);
        return value > 0 && !words.equals("0") ? "+" + words : words;
    }
}
