package steelyard.harness.cli;

import java.util.ArrayList;
import java.util.List;
import java.util.Objects;
import steelyard.harness.forecast.Forecast;
import steelyard.harness.forecast.Foreseen;
import steelyard.harness.forecast.Held;
import steelyard.harness.forecast.Spread;

/** A forecast as a person reads it: in a sentence, each expectation with the share of plays that held it, each measure. */
final class ForecastText {
    private static final String GAP = "  ";
    private static final int MOST_MEASURES = 40;
    private static final List<String> EXPECTATIONS =
            List.of("expectation", "bound", "median", "90 % of plays", "held in", "95 % confidence", "");
    private static final List<String> MEASURES = List.of("measure", "median", "90 % of plays");

    private ForecastText() {}

    /** @param width a table wider than that is written one row after the other */
    static List<String> lines(Forecast forecast, int width) {
        List<String> lines = new ArrayList<>(VerdictText.wrapped("", forecast.text(), width));
        lines.addAll(UnfitText.lines(forecast.text(), forecast.checks(), width));
        List<Foreseen> expectations = forecast.expectations();
        if (!expectations.isEmpty()) {
            lines.add("");
            lines.addAll(TextTable.lines(
                    EXPECTATIONS,
                    expectations.stream().map(ForecastText::expectation).toList(),
                    width));
        }
        List<Foreseen> measures = forecast.measures().size() <= MOST_MEASURES
                ? forecast.measures()
                : forecast.measures().stream()
                        .filter(each -> each.figure().of() == null)
                        .toList();
        lines.add("");
        lines.addAll(TextTable.lines(
                MEASURES, measures.stream().map(ForecastText::measure).toList(), width));
        lines.add("");
        if (measures.size() < forecast.measures().size()) {
            lines.add("Measures of single backends and pools are in run.json.");
        }
        List<Foreseen> shown = new ArrayList<>(expectations);
        shown.addAll(measures);
        shown.stream()
                .filter(each -> each.note() != null)
                .forEach(each -> lines.addAll(
                        VerdictText.wrapped("", "note on " + each.figure().text() + ": " + each.note(), width)));
        lines.addAll(VerdictText.wrapped("", "Bands are " + Spread.METHOD + "; " + Held.METHOD + ".", width));
        return lines;
    }

    private static List<String> expectation(Foreseen each) {
        Held held = Objects.requireNonNull(each.held(), "an expectation is held or not");
        return List.of(
                each.figure().text(),
                Objects.requireNonNullElse(each.figure().boundText(), ""),
                each.median(),
                each.band(),
                Foreseen.percent(held.share()) + " %",
                Foreseen.percent(held.low()) + " to " + Foreseen.percent(held.high()) + " %",
                each.met() ? "met" : "not met");
    }

    private static List<String> measure(Foreseen each) {
        return List.of(each.figure().text(), each.median(), each.band());
    }
}
