package steelyard.harness.report;

import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunData.FindingRow;
import steelyard.harness.record.RunData.ForecastRow;
import steelyard.harness.record.RunData.HeldRow;
import steelyard.harness.record.RunData.StandingRow;
import steelyard.harness.report.Html.Column;

/** What the page of a forecast says otherwise than that of a play. */
final class ForecastSection {
    /** What stands in the field of what was measured. */
    static final String MEASURED = "Median (90 % of plays)";

    private ForecastSection() {}

    /** {@code Forecast by 200 plays in virtual time · 60 s each · seeds 1 to 200}. */
    static String kicker(RunData run, ForecastRow forecast) {
        String seeds = forecast.plays() < 2
                ? "seed " + run.seed()
                : "seeds " + run.seed() + " to " + (run.seed() + forecast.plays() - 1);
        return "Forecast by " + plays(forecast.plays()) + " in virtual time · " + Figures.seconds(run.lasts())
                + " each · " + seeds + " · Steelyard " + run.version();
    }

    static String interrupted(ForecastRow forecast) {
        return "The forecast was interrupted; this is of the first " + plays(forecast.plays()) + " of "
                + Figures.count(forecast.wanted()) + ".";
    }

    static String why(String ended) {
        return ended.equals("playing")
                ? "the forecast was going on when it was last heard of."
                : "the forecast was interrupted before a play had ended.";
    }

    static String expectations(List<FindingRow> expectations) {
        List<Column> columns = List.of(
                Column.rowHead("Measure"),
                Column.number("Bound", ""),
                Column.number(MEASURED, ""),
                Column.number("Held in", ""),
                Column.number("95 % confidence", ""),
                Column.outcome("Outcome"));
        Html table = new Html().table("expectations cards", "Expectations", columns);
        for (FindingRow each : expectations) {
            table.row(
                    columns,
                    List.of(
                            VerdictSection.text(each),
                            VerdictSection.orEmpty(each.bound()),
                            each.measured(),
                            share(each.held()),
                            interval(each.held()),
                            outcome(each)));
        }
        return table.endTable().toString();
    }

    private static String share(@Nullable HeldRow held) {
        return held == null ? "" : percent(held.share());
    }

    private static String interval(@Nullable HeldRow held) {
        return held == null ? "" : percent(held.low()) + " to " + percent(held.high());
    }

    /** Without a decimal that is zero, as the sentence of the verdict has it. */
    private static String percent(double share) {
        return Figures.trimmed(share * 100) + " %";
    }

    private static String outcome(FindingRow each) {
        String outcome = each.met() ? "met" : "not met";
        return each.why() == null ? outcome : outcome + ": " + each.why();
    }

    /** How the figures above it were taken. */
    static String method(ForecastRow forecast) {
        String bands = forecast.bandPlays() < forecast.plays()
                ? " Charts and changes of standing are of the first " + plays(forecast.bandPlays()) + "."
                : "";
        return "<p class=\"hint\">"
                + Html.text("An expectation is met when it holds in at least "
                        + percent(forecast.hold()) + " of plays. Bands are " + forecast.quantiles() + "; "
                        + forecast.interval() + "." + bands)
                + "</p>\n";
    }

    static String changes(List<StandingRow> changes) {
        List<Column> columns = List.of(
                Column.number("At, median", "s"),
                Column.number("5 %", "s"),
                Column.number("95 %", "s"),
                Column.rowHead("Backend"),
                Column.words("From"),
                Column.words("To"),
                Column.words("Cause"),
                Column.number("In plays", "%"));
        Html table = new Html().table("changes", "Changes of standing over plays", columns);
        for (StandingRow change : changes) {
            table.row(
                    columns,
                    List.of(
                            Figures.fixed(change.at(), 3),
                            Figures.fixed(change.low(), 3),
                            Figures.fixed(change.high(), 3),
                            change.backend(),
                            change.from(),
                            change.to(),
                            change.cause(),
                            Figures.percent(change.share())));
        }
        return table.endTable().toString();
    }

    private static String plays(int count) {
        return Figures.count(count) + (count == 1 ? " play" : " plays");
    }
}
