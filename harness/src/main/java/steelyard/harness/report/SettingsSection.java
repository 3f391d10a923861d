package steelyard.harness.report;

import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
import java.util.function.Function;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.RunData.HostRow;
import steelyard.harness.record.RunData.PoolRow;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.report.Html.Column;

/** The foot of the page: what stood on the stage, whether the run may be trusted, and on which machine it ran. */
final class SettingsSection {
    /** The wall clock stays in {@code machine.json}. */
    private static final String STARTED = "started";

    private static final double MEBIBYTE = 1024 * 1024;

    private SettingsSection() {}

    static String settings(RunFiles files) {
        return pools(files.run().pools()) + stage(files.run());
    }

    private static String pools(List<PoolRow> pools) {
        List<Column> columns = new ArrayList<>(List.of(Column.rowHead("Setting")));
        pools.forEach(pool -> columns.add(Column.words("Pool " + pool.name())));
        Html table = new Html().table("settings", "Pools", columns);
        table.row(columns, across("method", pools, pool -> whole(pool.method())));
        table.row(columns, across("count", pools, PoolRow::count));
        table.row(columns, across("weights", pools, PoolRow::weights));
        Set<String> keys = new LinkedHashSet<>();
        pools.forEach(pool -> keys.addAll(pool.settings().keySet()));
        for (String key : keys) {
            table.row(columns, across(key, pools, pool -> whole(pool.settings().getOrDefault(key, Figures.NONE))));
        }
        return table.endTable().toString();
    }

    /** Words with a hyphen are not broken, and neither is a number from its unit. */
    private static String whole(String text) {
        return text.replaceAll("(?<=\\w)-(?=\\w)", "\u2011")
                .replaceAll("(\\d) (%|ms|s|B|KiB|MiB)(?![a-zA-Z])", "$1\u00a0$2");
    }

    private static List<String> across(String key, List<PoolRow> pools, Function<PoolRow, String> setting) {
        List<String> cells = new ArrayList<>(List.of(whole(key)));
        pools.forEach(pool -> cells.add(setting.apply(pool)));
        return cells;
    }

    private static String stage(RunData run) {
        List<Column> columns = List.of(
                Column.rowHead("Backend"),
                Column.number("Weight", ""),
                Column.words("Pool"),
                Column.words("Host"),
                Column.number("Host weight", ""),
                Column.words("Zone"));
        Html table = new Html().table("stage", "Backends and hosts", columns);
        for (BackendRow backend : run.backends()) {
            List<String> cells = new ArrayList<>(
                    List.of(backend.name(), Integer.toString(backend.weight()), backend.pool(), backend.host()));
            cells.addAll(run.hosts().stream()
                    .filter(host -> host.name().equals(backend.host()))
                    .findFirst()
                    .map(SettingsSection::host)
                    .orElse(List.of(Figures.NONE, Figures.NONE)));
            table.row(columns, cells);
        }
        return table.endTable().toString();
    }

    private static List<String> host(HostRow host) {
        return List.of(Integer.toString(host.weight()), host.zone() == null ? Figures.NONE : host.zone());
    }

    static String checks(RunFiles files) {
        if (files.run().checks().isEmpty()) {
            return "<p>None were made: the play has no verdict.</p>\n";
        }
        List<Column> columns = List.of(Column.rowHead("Check"), Column.words("Outcome"), Column.words("Found"));
        Html table = new Html().table("checks", "Self-checks", columns);
        for (SelfCheck check : files.run().checks()) {
            table.row(columns, List.of(check.check(), check.ok() ? "holds" : "does not hold", check.text()));
        }
        return table.endTable().toString();
    }

    /** Only a live run depends on its machine. */
    static String machine(RunFiles files) {
        if (!files.live()) {
            return "<p>A play in virtual time does not depend on its machine.</p>\n";
        }
        List<Column> columns = List.of(Column.rowHead("Part"), Column.words("Found"));
        Html table = new Html().table("machine", "Machine", columns);
        files.run().machine().forEach((part, found) -> {
            if (part.equals("memory")) {
                table.row(columns, List.of(part, mebibytes(found)));
            } else if (!part.equals(STARTED)) {
                table.row(columns, List.of(part, found));
            }
        });
        return table.endTable().toString();
    }

    private static String mebibytes(String bytes) {
        return Figures.count(Long.parseLong(bytes) / MEBIBYTE) + " MiB";
    }
}
