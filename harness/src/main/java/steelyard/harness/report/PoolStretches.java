package steelyard.harness.report;

import java.util.ArrayList;
import java.util.List;
import steelyard.harness.record.Slices;
import steelyard.harness.report.Html.Column;
import steelyard.harness.report.Stretches.Stretch;

/** Where there are several pools: what the clients of each saw between cues. */
final class PoolStretches {
    private static final double HALF_A_SLICE = Columns.SECONDS / 2;

    private PoolStretches() {}

    /** Nothing for one pool, or where the slices do not tell of pools. */
    static String html(RunFiles run, List<Stretch> stretches) {
        Slices slices = run.run().slices();
        if (run.pools().size() < 2
                || run.run().forecast() != null
                || !slices.has(column(run.pools().get(0), "offered"))) {
            return "";
        }
        List<Column> columns = new ArrayList<>(List.of(Column.rowHead("Stretch")));
        for (String pool : run.pools()) {
            columns.add(Column.number("Offered to " + pool, ""));
            columns.add(Column.failure("Failed of " + pool));
        }
        Html table = new Html().table("stretches cards", "Requests of each pool in each stretch", columns);
        for (Stretch stretch : stretches) {
            List<String> cells = new ArrayList<>(List.of(StretchSection.span(stretch)));
            for (String pool : run.pools()) {
                cells.add(Figures.count(sum(slices, column(pool, "offered"), stretch)));
                cells.add(Figures.count(sum(slices, column(pool, "failed"), stretch)));
            }
            table.row(columns, cells);
        }
        return table.endTable().toString();
    }

    private static String column(String pool, String what) {
        return "pool " + pool + ":" + what;
    }

    private static double sum(Slices slices, String column, Stretch stretch) {
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
