package steelyard.harness.judge;

import java.util.Arrays;
import java.util.Set;
import java.util.stream.IntStream;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Sample;

/**
 * {@code fairness}: Jain's index of attempts over the time integral of entitled share, of the target's backends, pool
 * by pool; the least of several pools. A sample's entitled share is taken for the stretch that it ends. Backends that
 * were entitled to nothing are left out.
 */
final class Fairness extends Meter {
    private final WindowPicks picks;
    private final Cast cast;
    private final int[] members;
    private final double[] entitledNanos;
    private long lastSampleNanos;

    Fairness(WindowPicks picks, int[] members, Cast cast) {
        this.picks = picks;
        this.members = members;
        this.cast = cast;
        entitledNanos = new double[cast.backends().size()];
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.SAMPLES);
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        long spanNanos = picks.window().overlapNanos(lastSampleNanos, atNanos);
        lastSampleNanos = atNanos;
        if (spanNanos > 0) {
            for (int backend : members) {
                entitledNanos[backend] += sample.entitledShare[backend] * spanNanos;
            }
        }
    }

    @Override
    Reading read() {
        double least = IntStream.of(members)
                .map(cast::poolOf)
                .distinct()
                .mapToDouble(this::ofPool)
                .filter(index -> !Double.isNaN(index))
                .min()
                .orElse(Double.NaN);
        return Double.isNaN(least) ? Reading.notMeasured("nothing was picked") : Reading.of(least);
    }

    private double ofPool(int pool) {
        return Jain.index(Arrays.stream(members)
                .filter(backend -> cast.poolOf(backend) == pool && entitledNanos[backend] > 0)
                .mapToDouble(backend -> picks.ofBackend(backend) * 1e9 / entitledNanos[backend])
                .toArray());
    }
}
