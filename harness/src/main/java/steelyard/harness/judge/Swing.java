package steelyard.harness.judge;

import java.util.Arrays;
import java.util.Set;
import java.util.stream.IntStream;
import steelyard.harness.record.Cast;

/**
 * {@code swing}: the greatest less the least share of a backend over windows of one load-probe period. They follow each
 * other from the start of the expectation's window; the first two are left out, and so are one that does not end inside
 * it and those in which nothing was picked. Of several backends, the one that swings most.
 */
final class Swing extends Meter {
    private static final int LEFT_OUT = 2;

    private final Window window;
    private final Cast cast;
    private final int[] members;
    /** By pool: 0 where nothing reads the load. */
    private final long[] periodNanos;

    private final long[] period;
    private final int[] measured;
    private final long[] pickedOfPool;
    private final long[] picked;
    private final double[] least;
    private final double[] most;

    Swing(Window window, int[] members, Cast cast) {
        this.window = window;
        this.cast = cast;
        this.members = members;
        int pools = cast.pools().size();
        int backends = cast.backends().size();
        periodNanos = new long[pools];
        for (int pool : IntStream.of(members).map(cast::poolOf).distinct().toArray()) {
            periodNanos[pool] = cast.loadPeriodNanos(pool);
        }
        period = new long[pools];
        measured = new int[pools];
        pickedOfPool = new long[pools];
        picked = new long[backends];
        least = new double[backends];
        most = new double[backends];
        Arrays.fill(least, 1);
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.PICKS);
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        if (periodNanos[pool] == 0 || !window.holds(atNanos)) {
            return;
        }
        close(pool, atNanos);
        pickedOfPool[pool]++;
        picked[backend]++;
    }

    @Override
    public void ended(long atNanos, boolean complete) {
        for (int pool = 0; pool < periodNanos.length; pool++) {
            if (periodNanos[pool] > 0) {
                close(pool, Math.min(atNanos, window.toNanos()));
            }
        }
    }

    /** Ends the period that was counted, if it was over by then. */
    private void close(int pool, long atNanos) {
        long now = (atNanos - window.fromNanos()) / periodNanos[pool];
        if (now <= period[pool]) {
            return;
        }
        boolean counts = period[pool] >= LEFT_OUT && pickedOfPool[pool] > 0;
        measured[pool] += counts ? 1 : 0;
        for (int backend : members) {
            if (cast.poolOf(backend) == pool) {
                if (counts) {
                    double share = (double) picked[backend] / pickedOfPool[pool];
                    least[backend] = Math.min(least[backend], share);
                    most[backend] = Math.max(most[backend], share);
                }
                picked[backend] = 0;
            }
        }
        pickedOfPool[pool] = 0;
        period[pool] = now;
    }

    @Override
    Reading read() {
        int[] known = IntStream.of(members)
                .filter(backend -> measured[cast.poolOf(backend)] > 1)
                .toArray();
        if (known.length == 0) {
            boolean read = IntStream.of(members).anyMatch(backend -> periodNanos[cast.poolOf(backend)] > 0);
            return Reading.notMeasured(
                    read
                            ? "fewer than two load-probe periods with picks, behind the first two"
                            : "nothing reads the load of the target");
        }
        return Reading.of(IntStream.of(known)
                .mapToDouble(backend -> most[backend] - least[backend])
                .max()
                .orElseThrow());
    }
}
