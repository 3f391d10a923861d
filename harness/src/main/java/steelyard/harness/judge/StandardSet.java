package steelyard.harness.judge;

import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Expectation.Options;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Pool.Weights;
import steelyard.drills.model.Target;

/** The measures that every play is given, whatever its drill expects: over the whole play, bound by nothing. */
final class StandardSet {
    private static final Bound ANYTHING = new Bound(Double.NEGATIVE_INFINITY, Double.POSITIVE_INFINITY);

    private final Drill drill;
    private final List<Expectation> set = new ArrayList<>();

    private StandardSet(Drill drill) {
        this.drill = drill;
    }

    static List<Expectation> of(Drill drill) {
        StandardSet standard = new StandardSet(drill);
        standard.fill();
        return List.copyOf(standard.set);
    }

    private void fill() {
        add(Measure.FAILED, null, Options.DEFAULT);
        add(Measure.LONGEST_OUTAGE, null, Options.DEFAULT);
        for (double quantile : new double[] {0.5, 0.95, 0.99, -1}) {
            Options normal = Options.DEFAULT;
            add(Measure.LATENCY, null, new Options(quantile, normal.causes(), 0, null, false, normal.outageShare()));
        }
        for (Backend backend : drill.stage().backends()) {
            add(Measure.SHARE, target(backend), Options.DEFAULT);
        }
        add(Measure.RETRY_LOAD, null, Options.DEFAULT);
        add(Measure.STANDING_CHANGES, null, Options.DEFAULT);
        add(Measure.PEAK_IN_FLIGHT, null, Options.DEFAULT);
        for (Backend backend : drill.stage().backends()) {
            add(Measure.PEAK_UTILISATION, target(backend), Options.DEFAULT);
        }
        for (Pool pool : drill.stage().pools()) {
            add(Measure.FAIRNESS, target(pool), Options.DEFAULT);
        }
        for (Pool pool : drill.stage().pools()) {
            if (pool.weights() == Weights.LOAD) {
                add(Measure.WEIGHT_LAG, target(pool), Options.DEFAULT);
                add(Measure.SWING, target(pool), Options.DEFAULT);
            }
        }
        add(Measure.CUT, null, Options.DEFAULT);
    }

    private void add(Measure measure, @Nullable Target of, Options options) {
        set.add(new Expectation(measure, of, null, 0, drill.lastsNanos(), null, options, ANYTHING));
    }

    private static Target target(Pool pool) {
        List<String> names = pool.backends().stream().map(Backend::name).toList();
        return new Target(Target.Kind.POOL, pool.name(), names);
    }

    private static Target target(Backend backend) {
        return new Target(Target.Kind.BACKENDS, backend.name(), List.of(backend.name()));
    }
}
