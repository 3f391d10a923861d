package steelyard.harness.record;

import java.util.ArrayList;
import java.util.List;
import java.util.function.ToDoubleFunction;

/**
 * A column of {@code slices.csv} that tells of one pool: {@code pool seats:offered}.
 *
 * @param value in a slice; NaN where there is none
 * @param decimals that it is written with
 */
public record PoolColumn(String name, ToDoubleFunction<Slice> value, int decimals) {

    /** Those that a stage has: requests where there are several pools, what waits where a pool lets requests wait. */
    public static List<PoolColumn> of(Cast cast) {
        List<PoolColumn> columns = new ArrayList<>();
        for (int each = 0; each < cast.pools().size(); each++) {
            int pool = each;
            if (cast.pools().size() > 1) {
                columns.add(new PoolColumn(name(cast, pool, "offered"), slice -> slice.offeredTo(pool), 0));
                columns.add(new PoolColumn(name(cast, pool, "failed"), slice -> slice.failedOf(pool), 0));
            }
            if (cast.letsWait(pool)) {
                columns.add(new PoolColumn(name(cast, pool, "waiting"), slice -> slice.waitingForBackend(pool), 0));
            }
        }
        return columns;
    }

    private static String name(Cast cast, int pool, String what) {
        return "pool " + cast.pools().get(pool).name() + ":" + what;
    }
}
