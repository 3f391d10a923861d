package steelyard.harness.report;

import java.util.ArrayList;
import java.util.Collection;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.RunData.PoolRow;
import steelyard.harness.record.RunData.ReadingRow;
import steelyard.harness.report.Html.Column;

/** Where weights go by load: when they did not, since readings failed to come. */
final class Readings {
    private Readings() {}

    /**
     * A stretch without a fresh reading, in seconds.
     *
     * @param ended false where the play ended first
     */
    record Gap(String backend, double from, double to, boolean ended) {}

    /** In the order in which they ended; those that the play ended come last. */
    static List<Gap> of(RunFiles run) {
        Map<String, Double> open = new LinkedHashMap<>();
        List<Gap> gaps = new ArrayList<>();
        for (ReadingRow each : run.run().readings()) {
            Double since = open.remove(each.backend());
            if (since != null) {
                gaps.add(new Gap(each.backend(), since, each.at(), true));
            }
            if (!each.fresh()) {
                open.put(each.backend(), each.at());
            }
        }
        double end = Math.max(run.played(), run.run().lasts());
        open.forEach((backend, since) -> gaps.add(new Gap(backend, since, Math.max(since, end), false)));
        return gaps;
    }

    /** Empty where nothing weighs by load. */
    static String html(RunFiles run) {
        if (run.run().pools().stream().noneMatch(PoolRow::weighsByLoad)) {
            return "";
        }
        return "<h2>Readings</h2>\n" + (run.run().forecast() != null ? forecast() : ofPlay(run));
    }

    private static String forecast() {
        return "<p>Slices hold the headroom that was read, over plays; when readings failed to come is told of single plays"
                + " alone.</p>\n";
    }

    private static String ofPlay(RunFiles run) {
        Map<String, Double> first = new LinkedHashMap<>();
        run.run().readings().stream()
                .filter(ReadingRow::fresh)
                .forEach(each -> first.putIfAbsent(each.backend(), each.at()));
        Map<String, List<Gap>> gaps = new LinkedHashMap<>();
        for (BackendRow each : run.backends()) {
            if (!first.containsKey(each.name()) && weighsByLoad(run, each)) {
                gaps.put(each.name(), List.of());
            }
        }
        of(run).stream()
                .filter(each -> first.containsKey(each.backend()))
                .forEach(each -> gaps.computeIfAbsent(each.backend(), none -> new ArrayList<>())
                        .add(each));
        return began(first.values()) + (gaps.isEmpty() ? "" : table(gaps));
    }

    private static boolean weighsByLoad(RunFiles run, BackendRow backend) {
        return run.run().pools().stream()
                .anyMatch(pool -> pool.weighsByLoad() && pool.name().equals(backend.pool()));
    }

    private static String began(Collection<Double> first) {
        if (first.isEmpty()) {
            return "<p>No reading of the load came, so the set weights stood throughout.</p>\n";
        }
        return "<p>Set weights stood until the first readings came, from " + Figures.fixed(Collections.min(first), 2)
                + " s to " + Figures.fixed(Collections.max(first), 2) + " s.</p>\n";
    }

    private static String table(Map<String, List<Gap>> gaps) {
        List<Column> columns = List.of(
                Column.rowHead("Backend"),
                Column.number("Times", ""),
                Column.number("First", "s"),
                Column.number("Last until", "s"),
                Column.number("Together", "s"));
        Html table = new Html().table("readings", "Without a fresh reading, so that the set weight stood", columns);
        gaps.forEach((backend, own) -> table.row(columns, row(backend, own)));
        return table.endTable().toString();
    }

    private static List<String> row(String backend, List<Gap> own) {
        if (own.isEmpty()) {
            return List.of(backend, "never read", "", "", "");
        }
        Gap last = own.get(own.size() - 1);
        return List.of(
                backend,
                Figures.count(own.size()),
                Figures.fixed(own.get(0).from(), 3),
                last.ended() ? Figures.fixed(last.to(), 3) : "the end",
                Figures.fixed(
                        own.stream()
                                .mapToDouble(each -> each.to() - each.from())
                                .sum(),
                        1));
    }
}
