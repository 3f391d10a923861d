package steelyard.harness.report;

import com.fasterxml.jackson.databind.JsonNode;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import steelyard.harness.report.Html.Column;

/** The foot of the page: what stood on the stage, whether the run may be trusted, and on which machine it ran. */
final class SettingsSection {
    private SettingsSection() {}

    static String settings(RunFiles run) {
        return pools(run.run().at("/cast/pools")) + stage(run.run().path("cast"));
    }

    private static String pools(JsonNode pools) {
        List<Column> columns = new ArrayList<>(List.of(Column.rowHead("Setting")));
        Set<String> keys = new LinkedHashSet<>();
        for (JsonNode pool : pools) {
            columns.add(Column.words("Pool " + pool.path("name").asText()));
            pool.path("settings").fieldNames().forEachRemaining(keys::add);
        }
        Html table = new Html().table("settings", "Pools", columns);
        for (String key : List.of("method", "count", "weights")) {
            table.row(columns, across(key, pools, "/" + key));
        }
        for (String key : keys) {
            if (!List.of("method", "count", "weights").contains(key)) {
                List<String> cells = new ArrayList<>(List.of(key));
                pools.forEach(pool -> cells.add(pool.path("settings").path(key).asText("")));
                table.row(columns, cells);
            }
        }
        return table.endTable().toString();
    }

    private static List<String> across(String key, JsonNode pools, String pointer) {
        List<String> cells = new ArrayList<>(List.of(key));
        pools.forEach(pool -> cells.add(pool.at(pointer).asText("")));
        return cells;
    }

    private static String stage(JsonNode cast) {
        List<Column> columns = List.of(
                Column.rowHead("Backend"),
                Column.number("Weight", ""),
                Column.words("Pool"),
                Column.words("Host"),
                Column.number("Host weight", ""),
                Column.words("Zone"));
        Html table = new Html().table("stage", "Backends and hosts", columns);
        for (JsonNode backend : cast.path("backends")) {
            JsonNode host = named(cast.path("hosts"), backend.path("host").asText());
            table.row(
                    columns,
                    List.of(
                            backend.path("name").asText(),
                            backend.path("weight").asText(),
                            backend.path("pool").asText(),
                            backend.path("host").asText(),
                            host.path("weight").asText(Figures.NONE),
                            host.hasNonNull("zone") ? host.path("zone").asText() : Figures.NONE));
        }
        return table.endTable().toString();
    }

    private static JsonNode named(JsonNode list, String name) {
        for (JsonNode each : list) {
            if (each.path("name").asText().equals(name)) {
                return each;
            }
        }
        return list.path(name);
    }

    static String checks(RunFiles run) {
        JsonNode checks = run.run().path("checks");
        if (checks.isEmpty()) {
            return "<p>None were made: the play has no verdict.</p>\n";
        }
        List<Column> columns = List.of(Column.rowHead("Check"), Column.words("Outcome"), Column.words("Found"));
        Html table = new Html().table("checks", "Self-checks", columns);
        for (JsonNode check : checks) {
            table.row(
                    columns,
                    List.of(
                            check.path("check").asText(),
                            check.path("ok").asBoolean() ? "holds" : "does not hold",
                            check.path("text").asText()));
        }
        return table.endTable().toString();
    }

    /** Only a live run depends on its machine; when it ran is left to {@code machine.json}. */
    static String machine(RunFiles run) {
        if (!run.run().path("stage").asText().equals("live") || !run.machine().isObject()) {
            return "<p>A play in virtual time does not depend on its machine.</p>\n";
        }
        List<Column> columns = List.of(Column.rowHead("Part"), Column.words("Found"));
        Html table = new Html().table("machine", "Machine", columns);
        for (Map.Entry<String, JsonNode> field : run.machine().properties()) {
            if (!field.getKey().contains("start")) {
                String found =
                        field.getValue().isNull() ? "none" : field.getValue().asText();
                table.row(columns, List.of(field.getKey(), found));
            }
        }
        return table.endTable().toString();
    }
}
