package steelyard.harness.report;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
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
        return "<h2>Readings</h2>\n" + (run.run().forecast() != null ? forecast() : table(of(run)));
    }

    private static String forecast() {
        return "<p>Slices hold the headroom that was read, over plays; when readings failed to come is told of single plays"
                + " alone.</p>\n";
    }

    private static String table(List<Gap> gaps) {
        if (gaps.isEmpty()) {
            return "<p>Weights went by fresh readings of the load throughout, from the first reading of each backend on."
                    + "</p>\n";
        }
        List<Column> columns = List.of(
                Column.rowHead("Backend"),
                Column.number("Times", ""),
                Column.number("First", "s"),
                Column.number("Last until", "s"),
                Column.number("Together", "s"));
        Html table = new Html().table("readings", "Without a fresh reading, so that the set weight stood", columns);
        Map<String, List<Gap>> byBackend = new LinkedHashMap<>();
        gaps.forEach(each -> byBackend
                .computeIfAbsent(each.backend(), none -> new ArrayList<>())
                .add(each));
        byBackend.forEach((backend, own) -> table.row(columns, row(backend, own)));
        return table.endTable().toString();
    }

    private static List<String> row(String backend, List<Gap> own) {
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
