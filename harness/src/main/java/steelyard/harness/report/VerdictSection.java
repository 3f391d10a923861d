package steelyard.harness.report;

import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunData.FindingRow;
import steelyard.harness.record.RunData.ForecastRow;
import steelyard.harness.record.RunData.VerdictRow;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.report.Html.Column;

/** The top of the page: was it met, may it be judged, and by how much. */
final class VerdictSection {
    private VerdictSection() {}

    /** What kind of play this page is about, in one line. */
    static String kicker(RunFiles files) {
        RunData run = files.run();
        if (run.forecast() != null) {
            return ForecastSection.kicker(run, run.forecast());
        }
        String stage = files.live()
                ? "Rehearsal on the live stage, " + run.backendsRun() + " backends"
                : "Play on the virtual stage";
        return stage + " · " + length(files) + " · seed " + run.seed() + " · Steelyard " + run.version();
    }

    private static String length(RunFiles files) {
        String lasts = Figures.seconds(files.run().lasts());
        return files.complete() ? lasts : reached(files);
    }

    private static String reached(RunFiles files) {
        return Figures.seconds(files.played()) + " of "
                + Figures.seconds(files.run().lasts());
    }

    static String html(RunFiles files) {
        VerdictRow verdict = files.run().verdict();
        ForecastRow forecast = files.run().forecast();
        if (verdict == null) {
            return line("open", "No verdict: " + why(files)) + note("Nothing below has been judged.");
        }
        String ended = files.complete() || forecast == null ? "" : note(ForecastSection.interrupted(forecast));
        if (forecast == null && !files.complete()) {
            return line("open", verdict.text()) + note(others(files.run().checks()));
        }
        String kind = verdict.met() && verdict.fit() ? "met" : "not-met";
        return line(kind, verdict.text()) + note(fitness(files.run().checks(), verdict.fit())) + ended;
    }

    private static String why(RunFiles files) {
        if (files.run().forecast() != null) {
            return ForecastSection.why(files.run().ended());
        }
        return switch (files.run().ended()) {
            case "interrupted" -> "the play was interrupted at " + reached(files) + ".";
            case "playing" -> "the play had reached " + reached(files) + " when it was last heard of.";
            default -> "the run folder holds none.";
        };
    }

    private static String fitness(List<SelfCheck> checks, boolean fit) {
        long held = checks.stream().filter(SelfCheck::ok).count();
        String count = held + " of " + checks.size() + " self-checks hold.";
        return fit ? "Fit to judge: " + count : "Only " + count + " Nothing below is a verdict.";
    }

    /** Of an interrupted play: what is said beside that it was interrupted. */
    private static String others(List<SelfCheck> checks) {
        List<SelfCheck> others = checks.stream()
                .filter(check -> !check.check().equals(SelfCheck.PLAYED_TO_ITS_END))
                .toList();
        long held = others.stream().filter(SelfCheck::ok).count();
        return held + " of " + others.size() + " other self-checks hold.";
    }

    private static String line(String kind, String text) {
        int end = text.indexOf(':');
        String lead = end < 0 ? text : text.substring(0, end + 1);
        String rest = end < 0 ? "" : text.substring(end + 1);
        return "<p class=\"verdict " + kind + "\"><strong>" + Html.text(lead) + "</strong>" + Html.text(unbroken(rest))
                + "</p>\n";
    }

    /** A number and its unit stay on one line. */
    private static String unbroken(String text) {
        return text.replaceAll("(\\d) (%|ms|s)(?![a-z])", "$1\u00a0$2");
    }

    private static String note(String text) {
        return "<p class=\"fitness\">" + Html.text(text) + "</p>\n";
    }

    static String expectations(RunFiles files) {
        List<FindingRow> expectations = files.run().expectations();
        if (expectations.isEmpty()) {
            return files.run().verdict() == null
                    ? "<p>No expectation was judged.</p>\n"
                    : "<p>This drill expects nothing.</p>\n";
        }
        if (files.run().forecast() != null) {
            return ForecastSection.expectations(expectations);
        }
        List<Column> columns = List.of(
                Column.rowHead("Measure"),
                Column.number("Bound", ""),
                Column.number("Measured", ""),
                Column.number("Margin", ""),
                Column.outcome("Outcome"));
        Html table = new Html().table("expectations cards", "Expectations", columns);
        for (FindingRow each : expectations) {
            table.row(
                    columns,
                    List.of(text(each), orEmpty(each.bound()), each.measured(), orEmpty(each.margin()), outcome(each)));
        }
        return table.endTable().toString();
    }

    /** What was measured, with its target where the words leave it out. */
    static String text(FindingRow each) {
        String of = each.of();
        return of == null || each.text().contains(of) ? each.text() : each.text() + " (" + of + ")";
    }

    private static String outcome(FindingRow each) {
        if (!each.reached()) {
            return each.why() == null ? "not reached" : "not reached: " + each.why();
        }
        if (each.met()) {
            return each.why() == null ? "met" : "met: " + each.why();
        }
        if (each.why() != null) {
            return "not met: " + each.why();
        }
        if (each.value() > each.most()) {
            return "not met: above the bound";
        }
        return each.value() < each.least() ? "not met: below the bound" : "not met";
    }

    static String measures(RunFiles files) {
        List<FindingRow> measures = files.run().measures();
        if (measures.isEmpty()) {
            return "<p>None were taken.</p>\n";
        }
        String measured = files.run().forecast() == null ? "Measured" : ForecastSection.MEASURED;
        List<Column> columns = List.of(Column.rowHead("Measure"), Column.number(measured, ""), Column.words("Note"));
        Html table = new Html().table("measures", "Measures of the whole play", columns);
        for (FindingRow each : measures) {
            table.row(columns, List.of(text(each), each.measured(), orEmpty(each.why())));
        }
        return table.endTable().toString();
    }

    static String orEmpty(@Nullable String words) {
        return words == null ? "" : words;
    }
}
