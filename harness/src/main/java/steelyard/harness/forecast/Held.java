package steelyard.harness.forecast;

import org.apache.commons.statistics.interval.BinomialConfidenceInterval;
import org.apache.commons.statistics.interval.Interval;

/**
 * In how many plays an expectation held, and what that says of its chance to hold.
 *
 * @param held in so many plays
 * @param plays of so many, at least 1
 * @param low lower end of the 95 % confidence interval of the chance, from 0 to 1
 * @param high its upper end
 */
public record Held(int held, int plays, double low, double high) {
    /** How the interval is taken, in words. */
    public static final String METHOD = "95 % confidence interval of a share by Clopper and Pearson (1934)";

    private static final double ERROR_RATE = 0.05;
    /** Far below the distance of two counts, far above what a product of doubles is off. */
    private static final double NOTHING = 1e-9;

    /** The count with its interval, which covers the true chance in at least 95 % of forecasts. */
    public static Held of(int held, int plays) {
        Interval interval = BinomialConfidenceInterval.CLOPPER_PEARSON.fromErrorRate(plays, held, ERROR_RATE);
        return new Held(held, plays, interval.getLowerBound(), interval.getUpperBound());
    }

    /** From 0 to 1. */
    public double share() {
        return (double) held / plays;
    }

    /** Whether the share is at least {@code hold}, from 0 to 1. */
    public boolean reaches(double hold) {
        return held + NOTHING >= hold * plays;
    }
}
