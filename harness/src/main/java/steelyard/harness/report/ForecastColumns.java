package steelyard.harness.report;

import java.util.ArrayList;
import java.util.List;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.Slices;
import steelyard.harness.report.Columns.PerBackend;

/** The columns of a forecast as the charts and the tables of a rehearsal take them. */
final class ForecastColumns {
    private static final String MEAN = ":mean";

    private ForecastColumns() {}

    /** Means over plays, which can be added up over slices and backends. */
    static Columns means(Slices slices, List<BackendRow> rows) {
        return Columns.of(slices, rows, MEAN);
    }

    /**
     * Medians over plays, but for two: failures are means, since most slices have a median of none whatever fails; and the
     * attempts of a pool, the sum of its medians, are divided by median shares.
     */
    static Columns medians(Slices slices, List<BackendRow> rows) {
        Columns medians = Columns.of(slices, rows);
        if (medians.size() == 0) {
            return medians;
        }
        List<PerBackend> perBackend = new ArrayList<>();
        for (int row = 0; row < rows.size(); row++) {
            perBackend.add(medians.perBackend().get(row).withPicked(picked(slices, rows, rows.get(row))));
        }
        return new Columns(
                medians.from(),
                medians.offered(),
                medians.ok(),
                means(slices, rows).failed(),
                medians.p50(),
                medians.p95(),
                medians.p99(),
                medians.worst(),
                medians.retries(),
                perBackend);
    }

    private static double[] picked(Slices slices, List<BackendRow> rows, BackendRow own) {
        double[] share = slices.numbers(own.name(), "share");
        double[] picked = new double[share.length];
        for (int slice = 0; slice < picked.length; slice++) {
            double attempts = 0;
            double shares = 0;
            for (BackendRow other : rows) {
                if (other.pool().equals(own.pool())) {
                    attempts += slices.numbers(other.name(), "picked")[slice];
                    double each = slices.numbers(other.name(), "share")[slice];
                    shares += Double.isNaN(each) ? 0 : each;
                }
            }
            picked[slice] = shares == 0 || Double.isNaN(share[slice]) ? 0 : attempts * share[slice] / shares;
        }
        return picked;
    }
}
