package steelyard.drills.model;

import java.util.Collections;
import java.util.EnumSet;
import java.util.Objects;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * A bound on a measure.
 *
 * @param of the backends looked at, or null for the whole stage
 * @param pool the pool whose traffic is looked at, or null for all (from {@code of: {pool: ...}} of measures of requests)
 * @param fromNanos start of the window in play time
 * @param toNanos end of the window, itself outside, at most the play's length
 * @param after the name of the cue that a measure counts from, or null
 */
public record Expectation(
        Measure measure,
        @Nullable Target of,
        @Nullable String pool,
        long fromNanos,
        long toNanos,
        @Nullable String after,
        Options options,
        Bound bound) {

    public Expectation {
        Objects.requireNonNull(measure);
        Check.that(fromNanos >= 0 && fromNanos < toNanos, "an empty window: %d to %d", fromNanos, toNanos);
        Check.that(measure.countsFromCue() == (after != null), "%s and after:", measure.word());
    }

    /**
     * What a measure may be told beside target and window.
     *
     * @param quantile of {@code latency}, from 0 to 1; -1 for the mean
     * @param causes of {@code failed}: only these; all of them when nothing else was asked for
     * @param worstNanos of {@code failed} and {@code retry-load}: the worst stretch of that length; 0 for the whole window
     * @param until of {@code detected-in}: the shown standing to wait for, or null for not pickable
     * @param shown of {@code standing-changes}: count changes of the shown word
     * @param outageShare of {@code longest-outage}: failures are at least that share
     */
    public record Options(
            double quantile,
            Set<Cause> causes,
            long worstNanos,
            @Nullable Standing until,
            boolean shown,
            double outageShare) {

        /** What holds where a drill asks for nothing: the 99 % quantile, every cause, the whole window. */
        public static final Options DEFAULT = new Options(0.99, EnumSet.allOf(Cause.class), 0, null, false, 0.5);

        public Options {
            causes = causes.isEmpty() ? Set.of() : Collections.unmodifiableSet(EnumSet.copyOf(causes));
            Check.that(quantile == -1 || (quantile > 0 && quantile < 1), "quantile %s", quantile);
            Check.notNegative(worstNanos, "worst");
            Check.share(outageShare, "share");
        }
    }

    /**
     * From least to most, both inside, in the unit of the measure (nanoseconds, fraction, count).
     *
     * @param least negative infinity for no lower bound
     * @param most positive infinity for no upper bound
     */
    public record Bound(double least, double most) {
        public Bound {
            Check.that(least <= most, "a bound from %s to %s holds nothing", least, most);
        }

        public boolean holds(double measured) {
            return measured >= least && measured <= most;
        }
    }
}
