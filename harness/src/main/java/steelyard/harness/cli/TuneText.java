package steelyard.harness.cli;

import java.util.ArrayList;
import java.util.List;
import steelyard.harness.forecast.Spread;
import steelyard.harness.tune.Choice;
import steelyard.harness.tune.Confirmed;
import steelyard.harness.tune.Result;
import steelyard.harness.tune.Result.Axis;
import steelyard.harness.tune.TuneWords;
import steelyard.harness.tune.Tuning.Tuned;

/** A grid as a person reads it: every cell, then what one would take and why, so that this stays on the screen. */
final class TuneText {
    private TuneText() {}

    /** @param width a table wider than that is written one cell after the other */
    static List<String> lines(Tuned tuned, int width) {
        List<String> lines = new ArrayList<>();
        int cells = tuned.request().grid().cells().size();
        if (!tuned.complete()) {
            lines.add("Interrupted; this is of the first " + tuned.results().size() + " of " + cells + " cells.");
        }
        Choice choice = tuned.choice();
        lines.addAll(table(tuned, choice, width));
        lines.add("");
        Result any = tuned.results().get(0);
        lines.addAll(
                VerdictText.wrapped("", "want     " + TuneWords.aim(any.want().figure()), width));
        lines.addAll(VerdictText.wrapped(
                "", "against  " + TuneWords.aim(any.against().figure()), width));
        lines.addAll(VerdictText.wrapped(
                "",
                "Every cell was played with the same " + tuned.request().plays() + " seeds. Cells are ranked by means; "
                        + "what chance explains is told by 95 % intervals of paired differences. Bands are "
                        + Spread.METHOD + ".",
                width));
        lines.add("");
        String take =
                choice.taken().map(each -> "Take " + each.cell().words() + ". ").orElse("");
        lines.addAll(VerdictText.wrapped("", take + choice.reason(), width));
        if (!choice.note().isEmpty()) {
            lines.addAll(VerdictText.wrapped("", choice.note(), width));
        }
        return lines;
    }

    private static List<String> table(Tuned tuned, Choice choice, int width) {
        Result any = tuned.results().get(0);
        String want = any.want().figure().measure().word();
        String against = any.against().figure().measure().word();
        List<String> head = List.of(
                "cell",
                "settings",
                want + ": mean",
                "median",
                "90 % of plays",
                against + ": mean",
                "median",
                "90 % of plays",
                "all held",
                "");
        List<List<String>> rows = new ArrayList<>();
        for (int at = 0; at < tuned.results().size(); at++) {
            Result result = tuned.results().get(at);
            boolean taken = choice.taken().filter(result::equals).isPresent();
            rows.add(row(result, TuneWords.mark(result, tuned.marks().get(at), taken)));
        }
        return TextTable.lines(head, rows, width);
    }

    private static List<String> row(Result result, String mark) {
        List<String> row = new ArrayList<>();
        row.add(String.valueOf(result.cell().number()));
        row.add(result.cell().words());
        for (Axis axis : List.of(result.want(), result.against())) {
            row.add(TuneWords.mean(axis));
            row.add(TuneWords.median(axis));
            row.add(TuneWords.band90(axis));
        }
        row.add(TuneWords.share(result.held().share()));
        row.add(mark);
        return row;
    }

    /** Forecast beside rehearsal. */
    static List<String> confirmed(List<Confirmed> confirmed, int width) {
        if (confirmed.isEmpty()) {
            return List.of("No rehearsal came to its end.");
        }
        List<List<String>> rows = new ArrayList<>();
        for (Confirmed each : confirmed) {
            String cell = each.result().cell().number() + "";
            String settings = each.result().cell().words();
            rows.add(row(cell, settings, each.result().want(), each.want(), each.wantInside(), each.fit()));
            rows.add(row(cell, settings, each.result().against(), each.against(), each.againstInside(), each.fit()));
        }
        List<String> head = List.of("cell", "settings", "measure", "forecast, 95 % of plays", "rehearsed", "");
        List<String> lines = new ArrayList<>(List.of("Forecast beside rehearsal:", ""));
        lines.addAll(TextTable.lines(head, rows, width));
        return lines;
    }

    private static List<String> row(
            String cell, String settings, Axis axis, double value, boolean inside, boolean fit) {
        String word = fit ? (inside ? "inside" : "outside") : "unfit to judge";
        return List.of(
                cell,
                settings,
                axis.figure().text(),
                TuneWords.band95(axis),
                TuneWords.value(axis.figure().unit(), value),
                word);
    }
}
