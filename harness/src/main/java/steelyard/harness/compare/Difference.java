package steelyard.harness.compare;

import java.util.EnumSet;
import org.apache.commons.statistics.descriptive.DoubleStatistics;
import org.apache.commons.statistics.descriptive.Statistic;
import org.apache.commons.statistics.distribution.TDistribution;
import org.apache.commons.statistics.inference.DataDispersion;
import org.apache.commons.statistics.inference.TTest;
import org.apache.commons.statistics.interval.BinomialConfidenceInterval;
import org.apache.commons.statistics.interval.Interval;
import org.apache.commons.statistics.interval.NormalConfidenceInterval;

/**
 * How far a second mean or share lies from a first, with an interval. Above zero the second is larger.
 *
 * @param size second minus first
 * @param low lower end of the interval
 * @param high its upper end
 * @param method how the interval is taken
 */
public record Difference(double size, double low, double high, Method method) {
    /** How often an interval may miss, where nothing else is said. */
    public static final double ERROR_RATE = 0.05;

    /** How an interval is taken. */
    public enum Method {
        /** Mean of differences of plays of one seed: interval of a mean by the t distribution (Student 1908). */
        PAIRED("paired t interval over common seeds"),
        /** Difference of two means with variances of their own (Welch 1947). */
        WELCH("Welch's t interval"),
        /** Difference of two shares out of counts: Wilson intervals put together (Newcombe 1998, method 10). */
        NEWCOMBE("Newcombe's interval of two shares"),
        /** A single run beside a forecast: the forecast's band around the run. */
        BAND("95 % band of the forecast");

        private final String words;

        Method(String words) {
            this.words = words;
        }

        /** As it is written beside a result. */
        public String words() {
            return words;
        }
    }

    /**
     * The mean difference of values that belong together pair by pair, such as those of one seed under two settings.
     *
     * @param first at least two values
     * @param second as many
     * @param errorRate how often the interval may miss, above 0 and below 1
     */
    public static Difference paired(double[] first, double[] second, double errorRate) {
        if (first.length != second.length || first.length < 2) {
            throw new IllegalArgumentException(first.length + " values beside " + second.length);
        }
        double[] differences = new double[first.length];
        for (int at = 0; at < first.length; at++) {
            differences[at] = second[at] - first[at];
        }
        Moments moments = Moments.of(differences);
        if (moments.variance == 0) {
            return new Difference(moments.mean, moments.mean, moments.mean, Method.PAIRED);
        }
        Interval interval = NormalConfidenceInterval.MEAN.fromErrorRate(
                moments.mean, moments.variance, differences.length, errorRate);
        return new Difference(moments.mean, interval.getLowerBound(), interval.getUpperBound(), Method.PAIRED);
    }

    /** The difference of the means of values that have nothing to do with each other; at least two on each side. */
    public static Difference welch(double[] first, double[] second, double errorRate) {
        Moments one = Moments.of(first);
        Moments two = Moments.of(second);
        double size = two.mean - one.mean;
        double error = StrictMath.sqrt(one.variance / first.length + two.variance / second.length);
        if (error == 0) {
            return new Difference(size, size, size, Method.WELCH);
        }
        double freedom = TTest.withDefaults()
                .with(DataDispersion.HETEROSCEDASTIC)
                .test(first, second)
                .getDegreesOfFreedom();
        double half = TDistribution.of(freedom).inverseSurvivalProbability(errorRate / 2) * error;
        return new Difference(size, size - half, size + half, Method.WELCH);
    }

    /** The difference of two shares, each of them so many out of so many, above zero. */
    public static Difference shares(int first, int ofFirst, int second, int ofSecond, double errorRate) {
        double one = (double) first / ofFirst;
        double two = (double) second / ofSecond;
        Interval around = BinomialConfidenceInterval.WILSON_SCORE.fromErrorRate(ofFirst, first, errorRate);
        Interval beside = BinomialConfidenceInterval.WILSON_SCORE.fromErrorRate(ofSecond, second, errorRate);
        double size = two - one;
        double below = StrictMath.hypot(two - beside.getLowerBound(), around.getUpperBound() - one);
        double above = StrictMath.hypot(beside.getUpperBound() - two, one - around.getLowerBound());
        return new Difference(size, size - below, size + above, Method.NEWCOMBE);
    }

    /** Whether chance alone does not explain it: zero is outside the interval. */
    public boolean beyondChance() {
        return low > 0 || high < 0;
    }

    /** Mean and unbiased variance. */
    private record Moments(double mean, double variance) {
        static Moments of(double[] values) {
            DoubleStatistics all = DoubleStatistics.of(EnumSet.of(Statistic.MEAN, Statistic.VARIANCE), values);
            return new Moments(all.getAsDouble(Statistic.MEAN), all.getAsDouble(Statistic.VARIANCE));
        }
    }
}
