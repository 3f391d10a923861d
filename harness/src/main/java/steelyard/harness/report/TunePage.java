package steelyard.harness.report;

import java.io.IOException;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import steelyard.drills.model.Drill;
import steelyard.harness.forecast.Held;
import steelyard.harness.forecast.Spread;
import steelyard.harness.record.RunFolder;
import steelyard.harness.report.Html.Column;
import steelyard.harness.tune.Choice;
import steelyard.harness.tune.Confirmed;
import steelyard.harness.tune.Front.Mark;
import steelyard.harness.tune.Result;
import steelyard.harness.tune.Result.Axis;
import steelyard.harness.tune.TuneWords;
import steelyard.harness.tune.Tuning.Request;
import steelyard.harness.tune.Tuning.Tuned;
import steelyard.harness.tune.Variation;

/** Makes the page of a grid of settings: what one would take, the trade-off as a chart, every cell in a table. */
public final class TunePage {
    /** The page's name beside the grid's files. */
    public static final String FILE = "tune.html";

    private final Tuned tuned;
    private final Choice choice;

    private TunePage(Tuned tuned) {
        this.tuned = tuned;
        choice = tuned.choice();
    }

    /**
     * Writes {@value #FILE}, in place of an earlier one. The same grid gives the same bytes.
     *
     * @param tuned with at least one result
     * @param source the drill's text before any value was changed
     * @param version of Steelyard
     */
    public static void write(
            RunFolder folder, Tuned tuned, List<Confirmed> confirmed, Drill drill, String source, String version)
            throws IOException {
        TunePage page = new TunePage(tuned);
        Map<String, String> values = new HashMap<>();
        values.put("title", Html.text(drill.name()));
        values.put("about", Html.prose(drill.about()));
        values.put("styles", Assets.own("report.css") + Assets.own("tune.css"));
        values.put("kicker", Html.text(page.kicker(version)));
        values.put("verdict", page.verdict());
        values.put("axes", page.axes());
        values.put("chart", new TuneChart(tuned, page.choice).svg());
        values.put("cells", page.cells());
        values.put("rehearsed", rehearsed(confirmed));
        values.put("settings", page.settings());
        values.put("source", Html.text(source));
        folder.replace(FILE, Assets.page("tune.html", values));
    }

    private String kicker(String version) {
        Request request = tuned.request();
        int cells = request.grid().cells().size();
        String played = tuned.complete() ? cells + "" : tuned.results().size() + " of " + cells;
        return "Grid of settings on the virtual stage · " + played + " cells of " + request.plays() + " plays · seeds "
                + request.seed() + " to " + (request.seed() + request.plays() - 1) + " · Steelyard " + version;
    }

    private String verdict() {
        boolean taken = choice.taken().isPresent();
        String lead =
                choice.taken().map(each -> "Take " + each.cell().words() + ".").orElse("Take none of them.");
        StringBuilder html = new StringBuilder("<p class=\"verdict ")
                .append(taken ? "met" : "not-met")
                .append("\"><strong>")
                .append(Html.text(lead))
                .append("</strong> ")
                .append(Html.text(choice.reason()))
                .append("</p>\n");
        for (String note : List.of(
                choice.note(), tuned.complete() ? "" : "Interrupted: cells that were not complete are left out.")) {
            if (!note.isEmpty()) {
                html.append("<p class=\"fitness\">").append(Html.text(note)).append("</p>\n");
            }
        }
        return html.toString();
    }

    private String axes() {
        Result any = tuned.results().get(0);
        return "<p class=\"hint\">Wanted: " + Html.text(TuneWords.aim(any.want().figure())) + ". Against: "
                + Html.text(TuneWords.aim(any.against().figure()))
                + ". Means over plays. Numbers are those of the cells in the table below.</p>\n";
    }

    private String cells() {
        List<Column> columns = new ArrayList<>();
        columns.add(Column.rowHead("Cell"));
        for (Variation each : tuned.request().grid().variations()) {
            columns.add(Column.number(each.path(), ""));
        }
        columns.add(Column.number("All held", "of plays"));
        columns.add(Column.words("Mark"));
        Result any = tuned.results().get(0);
        for (Axis axis : List.of(any.want(), any.against())) {
            String word = axis.figure().measure().word();
            columns.add(Column.number(word, "mean"));
            columns.add(Column.number(word, "median"));
            columns.add(Column.number(word, "90 % of plays"));
        }
        Html table = new Html().table("cells", "Every cell, in the order of the grid", columns);
        for (int at = 0; at < tuned.results().size(); at++) {
            table.row(columns, row(tuned.results().get(at), tuned.marks().get(at)));
        }
        return table.endTable()
                .raw("<p class=\"hint\">" + Html.text(method()) + "</p>\n")
                .toString();
    }

    private List<String> row(Result result, Mark mark) {
        List<String> row = new ArrayList<>();
        row.add(String.valueOf(result.cell().number()));
        row.addAll(result.cell().values().values());
        row.add(TuneWords.share(result.held().share()));
        boolean taken = choice.taken().filter(result::equals).isPresent();
        row.add(TuneWords.mark(result, mark, taken));
        for (Axis axis : List.of(result.want(), result.against())) {
            row.add(TuneWords.mean(axis));
            row.add(TuneWords.median(axis));
            row.add(TuneWords.band90(axis));
        }
        return row;
    }

    private String method() {
        return "Every cell was played with the same seeds. Non-dominated: no other cell is better on one measure and at "
                + "least as good on the other, by means. Beaten within chance: others are, but the 95 % intervals of the "
                + "paired differences over common seeds hold zero. Bands are "
                + Spread.METHOD + ". All held: plays in which every expectation held; for an interval of that share, "
                + Held.METHOD + ", see grid.json.";
    }

    private static String rehearsed(List<Confirmed> confirmed) {
        if (confirmed.isEmpty()) {
            return "";
        }
        List<Column> columns = List.of(
                Column.rowHead("Cell"),
                Column.words("Measure"),
                Column.number("Forecast", "95 % of plays"),
                Column.number("Rehearsed", ""),
                Column.words("Rehearsal"));
        Html table =
                new Html().raw("<h2>Forecast beside rehearsal</h2>\n").table("rehearsed", "Cells rehearsed", columns);
        for (Confirmed each : confirmed) {
            table.row(columns, row(each, each.result().want(), each.want(), each.wantInside()));
            table.row(columns, row(each, each.result().against(), each.against(), each.againstInside()));
        }
        return table.endTable().toString();
    }

    private static List<String> row(Confirmed each, Axis axis, double value, boolean inside) {
        return List.of(
                String.valueOf(each.result().cell().number()),
                axis.figure().text(),
                TuneWords.band95(axis),
                TuneWords.value(axis.figure().unit(), value),
                each.fit() ? (inside ? "inside" : "outside") : "unfit to judge");
    }

    private String settings() {
        List<Column> columns = List.of(Column.rowHead("Setting"), Column.words("Values"));
        Html table = new Html().table("settings", "Varied settings", columns);
        for (Variation each : tuned.request().grid().variations()) {
            table.row(columns, List.of(each.path(), String.join(", ", each.values())));
        }
        return table.endTable().toString();
    }
}
