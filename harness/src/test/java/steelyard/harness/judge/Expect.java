package steelyard.harness.judge;

import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Expectation.Options;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Standing;
import steelyard.drills.model.Target;
import steelyard.harness.record.TestDrill;

/** One expectation, part by part; bound by nothing unless it says so. */
final class Expect {
    private final Measure measure;
    private @Nullable Target of;
    private @Nullable String pool;
    private @Nullable String after;
    private long fromNanos;
    private long toNanos = 10 * TestDrill.S;
    private double quantile = 0.99;
    private Set<Cause> causes = Options.DEFAULT.causes();
    private long worstNanos;
    private @Nullable Standing until;
    private boolean shown;
    private double least = Double.NEGATIVE_INFINITY;
    private double most = Double.POSITIVE_INFINITY;

    private Expect(Measure measure) {
        this.measure = measure;
    }

    static Expect that(Measure measure) {
        return new Expect(measure);
    }

    Expect of(Target target) {
        of = target;
        return this;
    }

    Expect pool(String name) {
        pool = name;
        return this;
    }

    Expect after(String cue) {
        after = cue;
        return this;
    }

    Expect from(long nanos) {
        fromNanos = nanos;
        return this;
    }

    Expect to(long nanos) {
        toNanos = nanos;
        return this;
    }

    Expect quantile(double share) {
        quantile = share;
        return this;
    }

    Expect causes(Cause... some) {
        causes = Set.of(some);
        return this;
    }

    Expect worst(long nanos) {
        worstNanos = nanos;
        return this;
    }

    Expect until(Standing standing) {
        until = standing;
        return this;
    }

    Expect shown() {
        shown = true;
        return this;
    }

    Expect between(double low, double high) {
        least = low;
        most = high;
        return this;
    }

    Expect atMost(double high) {
        most = high;
        return this;
    }

    Expectation build() {
        Options options = new Options(quantile, causes, worstNanos, until, shown, 0.5);
        return new Expectation(measure, of, pool, fromNanos, toNanos, after, options, new Bound(least, most));
    }

    /** The test drill with this expectation alone. */
    Drill drill() {
        return new TestDrill()
                .lasts(Math.max(10 * TestDrill.S, toNanos))
                .expect(build())
                .build();
    }
}
