package steelyard.harness.report;

import com.fasterxml.jackson.databind.JsonNode;
import java.util.List;
import steelyard.harness.report.Html.Column;

/** The top of the page: was it met, may it be judged, and by how much. */
final class VerdictSection {
    private VerdictSection() {}

    /** What kind of play this page is about, in one line. */
    static String kicker(RunFiles run) {
        JsonNode json = run.run();
        boolean live = json.path("stage").asText().equals("live");
        StringBuilder line = new StringBuilder(live ? "Rehearsal on the live stage" : "Play on the virtual stage");
        if (live) {
            line.append(", ").append(json.path("backends").asText()).append(" backends");
        }
        line.append(" · ").append(length(run));
        line.append(" · seed ").append(json.path("seed").asText());
        return line.append(" · Steelyard ")
                .append(json.at("/versions/steelyard").asText())
                .toString();
    }

    private static String length(RunFiles run) {
        String lasts = Figures.seconds(run.lasts());
        return complete(run) ? lasts : Figures.seconds(run.played()) + " of " + lasts;
    }

    private static boolean complete(RunFiles run) {
        return run.run().path("ended").asText().equals("complete");
    }

    static String html(RunFiles run) {
        JsonNode verdict = run.run().path("verdict");
        if (!verdict.isObject()) {
            return line("open", "No verdict: " + why(run)) + note("Nothing below has been judged.");
        }
        boolean met = verdict.path("met").asBoolean();
        boolean fit = verdict.path("fit").asBoolean();
        String ended = complete(run) ? "" : note("The play was interrupted at " + length(run) + ".");
        return line(met && fit ? "met" : "not-met", verdict.path("text").asText()) + note(fitness(run, fit)) + ended;
    }

    private static String why(RunFiles run) {
        String reached = Figures.seconds(run.played()) + " of " + Figures.seconds(run.lasts());
        return switch (run.run().path("ended").asText()) {
            case "interrupted" -> "the play was interrupted at " + reached + ".";
            case "playing" -> "the play had reached " + reached + " when this page was written.";
            default -> "the run folder holds none.";
        };
    }

    private static String fitness(RunFiles run, boolean fit) {
        JsonNode checks = run.run().path("checks");
        int held = 0;
        StringBuilder broken = new StringBuilder();
        for (JsonNode check : checks) {
            if (check.path("ok").asBoolean()) {
                held++;
            } else {
                broken.append(broken.length() == 0 ? "" : "; ")
                        .append(check.path("check").asText())
                        .append(" (")
                        .append(check.path("text").asText())
                        .append(')');
            }
        }
        String count = held + " of " + checks.size() + " self-checks hold";
        return fit ? "Fit to judge: " + count + "." : "Unfit to judge: " + count + "; not: " + broken + ".";
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

    static String expectations(RunFiles run) {
        JsonNode expectations = run.run().path("expectations");
        if (expectations.isEmpty()) {
            return "<p>" + (complete(run) ? "This drill expects nothing." : "No expectation was judged.") + "</p>\n";
        }
        List<Column> columns = List.of(
                Column.rowHead("Measure"),
                Column.words("Of"),
                Column.number("Bound", ""),
                Column.number("Measured", ""),
                Column.number("Margin", ""),
                Column.outcome("Outcome"));
        Html table = new Html().table("expectations cards", "Expectations", columns);
        for (JsonNode each : expectations) {
            table.row(
                    columns,
                    List.of(
                            words(each, "text"),
                            words(each, "of"),
                            words(each, "bound"),
                            words(each, "measured"),
                            words(each, "margin"),
                            outcome(each)));
        }
        return table.endTable().toString();
    }

    private static String outcome(JsonNode each) {
        if (each.path("met").asBoolean()) {
            return "met";
        }
        if (each.hasNonNull("why")) {
            return "not met: " + each.path("why").asText();
        }
        double value = each.path("value").asDouble(Double.NaN);
        if (each.hasNonNull("most") && value > each.path("most").asDouble()) {
            return "not met: above the bound";
        }
        if (each.hasNonNull("least") && value < each.path("least").asDouble()) {
            return "not met: below the bound";
        }
        return "not met";
    }

    static String measures(RunFiles run) {
        JsonNode measures = run.run().path("measures");
        if (measures.isEmpty()) {
            return "<p>None were taken.</p>\n";
        }
        List<Column> columns = List.of(
                Column.rowHead("Measure"), Column.words("Of"), Column.number("Measured", ""), Column.words("Note"));
        Html table = new Html().table("measures", "Measures of the whole play", columns);
        for (JsonNode each : measures) {
            table.row(
                    columns,
                    List.of(words(each, "text"), words(each, "of"), words(each, "measured"), words(each, "why")));
        }
        return table.endTable().toString();
    }

    private static String words(JsonNode node, String field) {
        return node.hasNonNull(field) ? node.path(field).asText() : "";
    }
}
