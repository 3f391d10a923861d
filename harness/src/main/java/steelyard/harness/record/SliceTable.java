package steelyard.harness.record;

import java.util.List;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Cause;

/** Writes {@code slices.csv}, one row a slice. */
final class SliceTable {
    private static final Cause[] CAUSES = Cause.values();

    private final RowFile rows;
    private final int backends;
    private final List<PoolColumn> pools;
    /** Backends whose weights go by their load: these have a column for the headroom too. */
    private final int[] loaded;

    SliceTable(RowFile rows, Cast cast) {
        this.rows = rows;
        List<Backend> backends = cast.backends();
        this.backends = backends.size();
        pools = PoolColumn.of(cast);
        loaded = cast.loaded();
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
        pools.forEach(each -> Csv.field(head.append(','), each.name()));
        for (int backend : loaded) {
            Csv.field(head.append(','), backends.get(backend).name() + ":headroom");
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
        for (PoolColumn each : pools) {
            Fixed.trimmed(row.append(','), each.value().applyAsDouble(slice), each.decimals());
        }
        for (int backend : loaded) {
            Fixed.decimals(row.append(','), slice.headroom(backend), 4);
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
