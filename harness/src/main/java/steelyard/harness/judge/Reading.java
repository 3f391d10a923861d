package steelyard.harness.judge;

import org.jspecify.annotations.Nullable;

/**
 * What a meter read at the end of a play.
 *
 * @param value in the unit of the measure, or NaN where it has none
 * @param word what to say instead of a value that is not there: {@code never} ...; null with a value
 * @param note why there is none, or what has to be said about the value
 */
record Reading(
        double value, @Nullable String word, @Nullable String note) {

    static Reading of(double value) {
        return new Reading(value, null, null);
    }

    static Reading noted(double value, String note) {
        return new Reading(value, null, note);
    }

    /** There was nothing to measure. */
    static Reading notMeasured(String why) {
        return new Reading(Double.NaN, "not measured", why);
    }

    /** What was waited for did not come. */
    static Reading never(String why) {
        return new Reading(Double.NaN, "never", why);
    }

    /** A quantile that lies among requests that were never answered. */
    static Reading infinite(String why) {
        return new Reading(Double.NaN, "infinite", why);
    }

    boolean hasValue() {
        return word == null;
    }
}
