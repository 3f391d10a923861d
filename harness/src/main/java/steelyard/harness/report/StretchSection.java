package steelyard.harness.report;

import java.util.ArrayList;
import java.util.List;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.report.Html.Column;
import steelyard.harness.report.Stretches.Part;
import steelyard.harness.report.Stretches.Stretch;

/** Two tables between cues: what clients saw, and what each backend bore. */
final class StretchSection {
    private StretchSection() {}

    static String html(RunFiles run) {
        List<Stretch> stretches = Stretches.of(run);
        return stretches.isEmpty()
                ? "<p>No slice was recorded.</p>\n"
                : clients(run, stretches) + PoolStretches.html(run, stretches) + backends(run, stretches);
    }

    private static String clients(RunFiles run, List<Stretch> stretches) {
        List<Column> columns = new ArrayList<>(List.of(
                Column.rowHead("Stretch"),
                Column.words("Opened by"),
                Column.number("Offered", ""),
                Column.number("Ok", ""),
                Column.failure("Failed")));
        List<String> causes = List.copyOf(stretches.get(0).failed().keySet());
        causes.forEach(cause -> columns.add(Column.failure(cause)));
        columns.add(Column.number("Latency 50 %", "ms"));
        columns.add(Column.number("Latency 99 %", "ms"));
        Html table = new Html().table("stretches cards", caption("Requests in each stretch", run), columns);
        for (Stretch stretch : stretches) {
            List<String> cells = new ArrayList<>(List.of(
                    span(stretch),
                    stretch.cues().isEmpty() ? "the start" : String.join(", ", stretch.cues()),
                    Figures.count(stretch.offered()),
                    Figures.count(stretch.ok()),
                    Figures.count(stretch.failed().values().stream()
                            .mapToDouble(Double::doubleValue)
                            .sum())));
            causes.forEach(cause -> cells.add(Figures.count(stretch.failed().getOrDefault(cause, 0.0))));
            cells.add(Figures.fixed(stretch.p50(), 1));
            cells.add(Figures.fixed(stretch.p99(), 1));
            table.row(columns, cells);
        }
        return table.endTable().toString();
    }

    /** What a reader should know about the tables. */
    static String note(RunFiles run) {
        String latencies = run.latencies().known()
                ? "Its latencies are quantiles of its good answers; a measure of latency counts a failed request as"
                        + " infinitely slow, so the two differ where requests failed."
                : "Its latencies are the means of its slices\u2019 quantiles of good answers, weighted by their number: near"
                        + " to the quantiles of the whole stretch, not the same.";
        return "A stretch runs from one cue to the next, to the slice of 100 ms. Requests are counted by due time, so one that"
                + " was due before a cue and failed by it stands before it. " + latencies;
    }

    private static String caption(String words, RunFiles run) {
        return run.run().forecast() == null ? words : words + ", means over plays";
    }

    static String span(Stretch stretch) {
        return Figures.plainSeconds(stretch.from()) + " to " + Figures.seconds(stretch.to());
    }

    /** Backends go down, not across, so that a long list stays readable. */
    private static String backends(RunFiles run, List<Stretch> stretches) {
        Html html = new Html();
        html.raw("<div class=\"wide\" tabindex=\"0\" role=\"region\" aria-label=\"Backends in each stretch\">"
                + "<table class=\"parts\"><caption>Backends in each stretch, in per cent</caption><thead>"
                + "<tr><th rowspan=\"2\" scope=\"col\">Backend</th>");
        stretches.forEach(stretch -> html.raw("<th colspan=\"3\" scope=\"colgroup\" class=\"group\">")
                .raw(Html.text(span(stretch)))
                .raw("</th>"));
        html.raw("</tr><tr>");
        stretches.forEach(stretch -> html.raw("<th scope=\"col\" class=\"n first\">share</th>"
                + "<th scope=\"col\" class=\"n\">entitled</th><th scope=\"col\" class=\"n\">busy</th>"));
        html.raw("</tr></thead><tbody>\n");
        for (String pool : run.pools()) {
            if (run.pools().size() > 1) {
                html.raw("<tr class=\"pool\"><th scope=\"rowgroup\" colspan=\"" + (1 + 3 * stretches.size())
                                + "\">pool ")
                        .raw(Html.text(pool))
                        .raw("</th></tr>\n");
            }
            for (int at = 0; at < run.backends().size(); at++) {
                BackendRow backend = run.backends().get(at);
                if (backend.pool().equals(pool)) {
                    row(html, backend, at, stretches);
                }
            }
        }
        return html.endTable().toString();
    }

    private static void row(Html html, BackendRow backend, int at, List<Stretch> stretches) {
        html.raw("<tr><th scope=\"row\">").raw(Html.text(backend.name())).raw("</th>");
        for (Stretch stretch : stretches) {
            Part part = stretch.parts().get(at);
            html.raw("<td class=\"n first\">")
                    .raw(Figures.percent(part.share()))
                    .raw("</td><td class=\"n\">")
                    .raw(Figures.percent(part.entitled()))
                    .raw("</td><td class=\"n\">")
                    .raw(Figures.percent(part.utilisation()))
                    .raw("</td>");
        }
        html.raw("</tr>\n");
    }
}
