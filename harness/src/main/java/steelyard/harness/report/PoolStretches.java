package steelyard.harness.report;

import java.util.ArrayList;
import java.util.List;
import steelyard.harness.record.SliceLatencies;
import steelyard.harness.record.Slices;
import steelyard.harness.report.Html.Column;
import steelyard.harness.report.Stretches.Stretch;

/** Where there are several pools: what the clients of each saw between cues. */
final class PoolStretches {
    private static final double HALF_A_SLICE = Columns.SECONDS / 2;
    private static final double NANOS_IN_MILLI = 1e6;

    private final RunFiles run;
    private final Slices slices;
    /** What the columns of means over plays end in; those of one play are as they are. */
    private final String ending;

    private final boolean latencies;

    private PoolStretches(RunFiles run) {
        this.run = run;
        slices = run.run().slices();
        ending = run.run().forecast() == null ? "" : ":mean";
        latencies = run.pools().stream()
                .anyMatch(pool -> run.latencies().ofPool(pool).known());
    }

    /** Nothing for one pool, or where the slices do not tell of pools. */
    static String html(RunFiles run, List<Stretch> stretches) {
        PoolStretches own = new PoolStretches(run);
        boolean told =
                run.pools().size() > 1 && own.slices.has(own.column(run.pools().get(0), "offered"));
        return told ? own.table(stretches) : "";
    }

    private String table(List<Stretch> stretches) {
        List<Column> columns = new ArrayList<>(List.of(
                Column.rowHead("Stretch"),
                Column.words("Pool"),
                Column.number("Offered", ""),
                Column.failure("Failed")));
        if (latencies) {
            columns.add(Column.number("Latency 50 %", "ms"));
            columns.add(Column.number("Latency 99 %", "ms"));
        }
        String caption = "Requests of each pool in each stretch" + (ending.isEmpty() ? "" : ", means over plays");
        Html table = new Html().table("stretches cards", caption, columns);
        for (Stretch stretch : stretches) {
            for (String pool : run.pools()) {
                table.row(columns, row(stretch, pool));
            }
        }
        return table.endTable().toString();
    }

    private List<String> row(Stretch stretch, String pool) {
        List<String> cells = new ArrayList<>(List.of(
                StretchSection.span(stretch),
                pool,
                Figures.count(sum(column(pool, "offered"), stretch)),
                Figures.count(sum(column(pool, "failed"), stretch))));
        if (latencies) {
            SliceLatencies own = run.latencies().ofPool(pool);
            int from = slice(stretch.from());
            int to = slice(stretch.to());
            cells.add(Figures.fixed(own.quantile(from, to, 0.5) / NANOS_IN_MILLI, 1));
            cells.add(Figures.fixed(own.quantile(from, to, 0.99) / NANOS_IN_MILLI, 1));
        }
        return cells;
    }

    private static int slice(double second) {
        return (int) Math.round(second / Columns.SECONDS);
    }

    private String column(String pool, String what) {
        return "pool " + pool + ":" + what + ending;
    }

    private double sum(String column, Stretch stretch) {
        double[] from = slices.numbers("from");
        double[] values = slices.numbers(column);
        double sum = 0;
        for (int slice = 0; slice < from.length; slice++) {
            boolean inside = from[slice] > stretch.from() - HALF_A_SLICE && from[slice] < stretch.to() - HALF_A_SLICE;
            sum += inside ? values[slice] : 0;
        }
        return sum;
    }
}
