package steelyard.harness.report;

import java.util.List;
import steelyard.harness.record.RunData.CueRow;
import steelyard.harness.record.RunData.StandingRow;
import steelyard.harness.report.Html.Column;

/** What happened when: the cues, and what the balancer came to think of its backends. */
final class CueSection {
    private CueSection() {}

    static String cues(RunFiles run) {
        if (run.run().cues().isEmpty()) {
            return "<p>No cue was played.</p>\n";
        }
        List<Column> columns = List.of(
                Column.number("No.", ""),
                Column.number("Due", "s"),
                Column.number("Applied", "s"),
                Column.rowHead("Cue"),
                Column.words("Action"),
                Column.words("By"));
        Html table = new Html().table("cues", "Cues", columns);
        int number = 1;
        for (CueRow cue : run.run().cues()) {
            table.row(
                    columns,
                    List.of(
                            Integer.toString(number++),
                            Figures.fixed(cue.due(), 3),
                            Figures.fixed(cue.at(), 3),
                            cue.cue(),
                            cue.action(),
                            by(cue.by())));
        }
        return table.endTable().toString();
    }

    private static String by(String word) {
        return switch (word) {
            case "drill" -> "the drill";
            case "hand" -> "hand";
            default -> word;
        };
    }

    static String changes(RunFiles run) {
        if (run.run().standings().isEmpty()) {
            return "<p>No standing changed.</p>\n";
        }
        if (run.run().forecast() != null) {
            return ForecastSection.changes(run.run().standings());
        }
        List<Column> columns = List.of(
                Column.number("At", "s"),
                Column.rowHead("Backend"),
                Column.words("From"),
                Column.words("To"),
                Column.words("Cause"));
        Html table = new Html().table("changes", "Changes of standing", columns);
        for (StandingRow change : run.run().standings()) {
            table.row(
                    columns,
                    List.of(
                            Figures.fixed(change.at(), 3),
                            change.backend(),
                            change.from(),
                            change.to(),
                            change.cause()));
        }
        return table.endTable().toString();
    }
}
