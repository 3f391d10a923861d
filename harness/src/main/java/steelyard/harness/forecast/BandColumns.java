package steelyard.harness.forecast;

import java.util.ArrayList;
import java.util.List;
import java.util.function.ToDoubleFunction;
import steelyard.drills.model.Cause;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PoolColumn;
import steelyard.harness.record.Slice;

/**
 * The columns of numbers that a slice of a forecast has, by place: of requests, then of each group. The order is that of
 * {@code slices.csv}.
 */
final class BandColumns {
    private static final Cause[] CAUSES = Cause.values();
    private static final double[] QUANTILES = {0.5, 0.95, 0.99, 1};
    private static final float NANOS_IN_MILLI = 1e6f;

    static final int OFFERED = 0;
    static final int OK = 1;
    static final int FAILED = 2;
    private static final int FIRST_CAUSE = 3;
    static final int P50 = FIRST_CAUSE + CAUSES.length;
    private static final int RETRIES = P50 + QUANTILES.length;
    private static final int REQUESTS = RETRIES + 1;

    /** Columns of a group, behind {@link #REQUESTS} and those of the groups before it. */
    static final int PICKED = 0;

    private static final int IN_FLIGHT = 1;
    private static final int WEIGHT = 2;
    private static final int ENTITLED = 3;
    private static final int UTILISATION = 4;
    private static final int WAITING = 5;
    static final List<String> OF_GROUP = List.of("picked", "in-flight", "weight", "entitled", "utilisation", "waiting");

    private final List<Group> groups;
    private final List<Extra> extras = new ArrayList<>();
    private final int[] workers;

    /** A column that only some stages have; they come behind all others. */
    private record Extra(String name, ToDoubleFunction<Slice> value) {}

    BandColumns(Cast cast) {
        groups = Group.of(cast);
        PoolColumn.of(cast).forEach(each -> extras.add(new Extra(each.name(), each.value())));
        groups.stream().filter(each -> weighsByLoad(each, cast)).forEach(each -> {
            extras.add(new Extra(each.name() + ":headroom", slice -> headroom(slice, each)));
        });
        workers = cast.backends().stream()
                .mapToInt(each -> each.serves().workers())
                .toArray();
    }

    List<Group> groups() {
        return groups;
    }

    int count() {
        return ofExtra(extras.size());
    }

    int ofGroup(int group, int column) {
        return REQUESTS + group * OF_GROUP.size() + column;
    }

    int ofExtra(int extra) {
        return REQUESTS + groups.size() * OF_GROUP.size() + extra;
    }

    /** The names of the columns that only some stages have, in order. */
    List<String> extras() {
        return extras.stream().map(Extra::name).toList();
    }

    private static boolean weighsByLoad(Group group, Cast cast) {
        return cast.weighsByLoad(cast.poolNumber(group.pool()));
    }

    /** The mean of the members. */
    private static double headroom(Slice slice, Group group) {
        return group.members().stream().mapToDouble(slice::headroom).average().orElse(1);
    }

    /** The names of the columns of requests, in order from place 0. */
    static List<String> ofRequests() {
        List<String> names = new ArrayList<>(List.of("offered", "ok", "failed"));
        for (Cause cause : CAUSES) {
            names.add(cause.word());
        }
        names.addAll(List.of("p50_ms", "p95_ms", "p99_ms", "worst_ms", "retries"));
        return names;
    }

    /** Puts a slice's numbers in place; a latency that there is not is NaN. */
    void fill(Slice slice, float[] values) {
        values[OFFERED] = slice.offered();
        values[OK] = slice.ok();
        values[FAILED] = slice.failed();
        for (Cause cause : CAUSES) {
            values[FIRST_CAUSE + cause.ordinal()] = slice.failedBy(cause);
        }
        for (int quantile = 0; quantile < QUANTILES.length; quantile++) {
            values[P50 + quantile] =
                    slice.ok() == 0 ? Float.NaN : slice.latencyNanos(QUANTILES[quantile]) / NANOS_IN_MILLI;
        }
        values[RETRIES] = slice.retries();
        for (int group = 0; group < groups.size(); group++) {
            fill(slice, group, values);
        }
        for (int extra = 0; extra < extras.size(); extra++) {
            values[ofExtra(extra)] = (float) extras.get(extra).value().applyAsDouble(slice);
        }
    }

    /** Sums over the members; the utilisation is that of all their workers. */
    private void fill(Slice slice, int group, float[] values) {
        long picked = 0;
        long inFlight = 0;
        long waiting = 0;
        double weight = 0;
        double entitled = 0;
        double busy = 0;
        long all = 0;
        for (int backend : groups.get(group).members()) {
            picked += slice.picked(backend);
            inFlight += slice.inFlight(backend);
            waiting += slice.waiting(backend);
            weight += slice.weight(backend);
            entitled += slice.entitled(backend);
            busy += slice.utilisation(backend) * workers[backend];
            all += workers[backend];
        }
        values[ofGroup(group, PICKED)] = picked;
        values[ofGroup(group, IN_FLIGHT)] = inFlight;
        values[ofGroup(group, WEIGHT)] = (float) weight;
        values[ofGroup(group, ENTITLED)] = (float) entitled;
        values[ofGroup(group, UTILISATION)] = (float) (busy / all);
        values[ofGroup(group, WAITING)] = waiting;
    }
}
