package steelyard.harness.record;

import java.util.List;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Cause;

/** Writes {@code slices.csv}, one row a slice. */
final class SliceTable {
    private static final Cause[] CAUSES = Cause.values();

    private final RowFile rows;
    private final int backends;
    private final int pools;

    /** Requests by pool have columns of their own where there are several pools. */
    SliceTable(RowFile rows, Cast cast) {
        this.rows = rows;
        List<Backend> backends = cast.backends();
        this.backends = backends.size();
        pools = cast.pools().size() > 1 ? cast.pools().size() : 0;
        StringBuilder head = rows.row().append("slice,from,offered,ok,failed");
        for (Cause cause : CAUSES) {
            head.append(',').append(cause.word());
        }
        head.append(",p50_ms,p95_ms,p99_ms,worst_ms,retries");
        for (Backend backend : backends) {
            for (String column : RunData.BACKEND_COLUMNS) {
                Csv.field(head.append(','), backend.name() + ":" + column);
            }
        }
        for (int pool = 0; pool < pools; pool++) {
            String name = "pool " + cast.pools().get(pool).name();
            Csv.field(head.append(','), name + ":offered");
            Csv.field(head.append(','), name + ":failed");
        }
        rows.write();
    }

    void write(Slice slice) {
        StringBuilder row = rows.row().append(slice.index()).append(',');
        Fixed.seconds(row, slice.index() * Slice.NANOS);
        row.append(',').append(slice.offered());
        row.append(',').append(slice.ok());
        row.append(',').append(slice.failed());
        for (Cause cause : CAUSES) {
            row.append(',').append(slice.failedBy(cause));
        }
        latency(row, slice, 0.5);
        latency(row, slice, 0.95);
        latency(row, slice, 0.99);
        latency(row, slice, 1);
        row.append(',').append(slice.retries());
        for (int b = 0; b < backends; b++) {
            backend(row, slice, b);
        }
        for (int pool = 0; pool < pools; pool++) {
            row.append(',').append(slice.offeredTo(pool)).append(',').append(slice.failedOf(pool));
        }
        rows.write();
    }

    private static void latency(StringBuilder row, Slice slice, double quantile) {
        row.append(',');
        if (slice.ok() > 0) {
            Fixed.millis(row, slice.latencyNanos(quantile));
        }
    }

    private static void backend(StringBuilder row, Slice slice, int b) {
        row.append(',').append(slice.picked(b));
        row.append(',').append(slice.inFlight(b));
        row.append(',').append(Words.of(slice.standing(b)));
        Fixed.decimals(row.append(','), slice.weight(b), 4);
        Fixed.decimals(row.append(','), slice.entitled(b), 6);
        Fixed.decimals(row.append(','), slice.utilisation(b), 4);
        row.append(',').append(slice.waiting(b));
    }
}
