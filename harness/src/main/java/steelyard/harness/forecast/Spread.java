package steelyard.harness.forecast;

import java.util.Arrays;
import org.apache.commons.statistics.descriptive.Quantile;
import org.apache.commons.statistics.descriptive.Quantile.EstimationMethod;

/**
 * Where a figure lies over plays. All values are in the unit of the figure; all NaN when no play has a value.
 *
 * <p>Quantiles are interpolated between order statistics at p (n + 1): Hyndman and Fan, "Sample Quantiles in Statistical
 * Packages", The American Statistician 50 (1996), type 6. It is the type under which one more play falls below the
 * p-quantile of n plays with chance p, which is what a band is read as; from too few plays a band is simply least to most.
 *
 * @param plays how many were played
 * @param undefined in how many of them the figure had no value; the rest of the spread leaves them out
 * @param low90 5 % quantile: with {@code high90} the 90 % band
 * @param low95 2.5 % quantile: with {@code high95} the 95 % band
 */
public record Spread(
        int plays,
        int undefined,
        double median,
        double low90,
        double high90,
        double low95,
        double high95,
        double least,
        double most) {

    /** How quantiles are taken, in words. */
    public static final String METHOD =
            "quantiles over plays, interpolated at p (n + 1) (Hyndman and Fan 1996, type 6)";

    private static final Quantile QUANTILE =
            Quantile.withDefaults().with(EstimationMethod.HF6).withCopy(false);
    private static final double[] PLACES = {0, 0.025, 0.05, 0.5, 0.95, 0.975, 1};
    private static final double[] BAND = {0.05, 0.5, 0.95};

    /** The spread of values; NaN stands for a play without one. */
    public static Spread of(double[] values) {
        double[] known =
                Arrays.stream(values).filter(each -> !Double.isNaN(each)).toArray();
        int undefined = values.length - known.length;
        if (known.length == 0) {
            double none = Double.NaN;
            return new Spread(values.length, undefined, none, none, none, none, none, none, none);
        }
        double[] at = QUANTILE.evaluate(known, PLACES);
        return new Spread(values.length, undefined, at[3], at[2], at[4], at[1], at[5], at[0], at[6]);
    }

    /** The 5 %, 50 % and 95 % quantiles of the first {@code size} values, which it puts in another order. */
    static double[] band(double[] values, int size) {
        return QUANTILE.evaluateRange(values, 0, size, BAND);
    }

    /** Whether every play that has a value has the same. */
    public boolean constant() {
        return least == most;
    }
}
