package steelyard.harness.record;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Measure;

/**
 * One measure of one play, beside its bound where there is one.
 *
 * @param of the target as a person reads it, or null for the whole stage
 * @param text what was measured, in words: {@code failed, from 14.9 s to 20 s}
 * @param bound null when nothing was expected
 * @param measured the value in words, or {@code never}, {@code not measured}, {@code infinite}
 * @param value in the unit of the measure (nanoseconds, fraction, count), or NaN where it has none
 * @param note why it has no value, or what has to be said about it; null for nothing
 * @param reached false when the play was interrupted before this could be known
 */
public record Finding(
        Measure measure,
        @Nullable String of,
        String text,
        @Nullable Bound bound,
        String measured,
        double value,
        @Nullable String note,
        boolean reached) {

    public Finding {
        if (Double.isInfinite(value)) {
            throw new IllegalArgumentException("a value that is infinite is NaN and says so in words");
        }
    }

    /** What a play found that got as far as this. */
    public Finding(
            Measure measure,
            @Nullable String of,
            String text,
            @Nullable Bound bound,
            String measured,
            double value,
            @Nullable String note) {
        this(measure, of, text, bound, measured, value, note, true);
    }

    /** Whether the bound held; true where nothing was expected, false where the play did not get that far. */
    public boolean met() {
        return bound == null || (reached && bound.holds(value));
    }

    /** {@code met}, {@code not met} or {@code not reached}. */
    public String outcome() {
        if (!reached) {
            return "not reached";
        }
        return met() ? "met" : "not met";
    }

    /** The bound in words, or null where nothing was expected. */
    public @Nullable String boundText() {
        return bound == null ? null : Wording.bound(measure.unit(), bound);
    }

    /**
     * How far the value is from the nearer end of its bound, in the unit of the measure: below zero when missed, NaN
     * without a value or a bound, or where the play did not get that far.
     */
    public double margin() {
        if (bound == null || !reached || Double.isNaN(value)) {
            return Double.NaN;
        }
        return Math.min(value - bound.least(), bound.most() - value);
    }

    /** The margin in words, or null where there is none. */
    public @Nullable String marginText() {
        double margin = margin();
        if (Double.isNaN(margin) || Double.isInfinite(margin)) {
            return null;
        }
        String size = Wording.value(measure.unit(), Math.abs(margin));
        return margin < 0 ? "missed by " + size : size;
    }
}
