package steelyard.outside.behave;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.stream.LongStream;
import org.apache.commons.math3.distribution.GammaDistribution;
import org.apache.commons.math3.stat.inference.ChiSquareTest;
import org.apache.commons.math3.stat.inference.KolmogorovSmirnovTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.ServiceTime;
import steelyard.backends.behave.ServiceTime.Gamma;
import steelyard.backends.behave.ServiceTime.Order;
import steelyard.backends.behave.ServiceTime.Trace;

/**
 * Gamma and traced service times against the laws that they claim, as Apache Commons Math computes them: Kolmogorov-Smirnov,
 * quantiles, Pearson's chi-square. The seed is fixed and was chosen beforehand; a p value below 1e-4 would be a finding.
 */
class ServiceTimeGoodnessTest {

    private static final Chance CHANCE = new Chance(20_241);
    private static final double LEAST_P = 1e-4;
    private static final int DRAWS = 100_000;
    private static final long MEAN_NANOS = 1_000_000_000_000L;

    @ParameterizedTest
    @ValueSource(doubles = {0.2, 0.5, 1, 1.5, 2, 4, 25, 400})
    void gamma_overRequests_isGamma(double shape) {
        double[] drawn = draws(new Gamma(MEAN_NANOS, shape), 1);
        assertThat(new KolmogorovSmirnovTest().kolmogorovSmirnovTest(law(shape), drawn))
                .isGreaterThan(LEAST_P);
    }

    @Test
    void gamma_overAttemptsAndOverSeeds_isGamma() {
        Gamma time = new Gamma(MEAN_NANOS, 2);
        double[] byAttempt = new double[DRAWS];
        double[] bySeed = new double[DRAWS];
        for (int i = 0; i < DRAWS; i++) {
            byAttempt[i] = (double) time.demandNanos(CHANCE, 5, i) / MEAN_NANOS;
            bySeed[i] = (double) time.demandNanos(new Chance(i), 5, 1) / MEAN_NANOS;
        }
        assertThat(new KolmogorovSmirnovTest().kolmogorovSmirnovTest(law(2), byAttempt))
                .isGreaterThan(LEAST_P);
        assertThat(new KolmogorovSmirnovTest().kolmogorovSmirnovTest(law(2), bySeed))
                .isGreaterThan(LEAST_P);
    }

    // Binomial: the share of draws below the p quantile is within 4 sqrt(p (1 - p) / n) of p. A draw is below it if its
    // rank is
    // below p; the library finds quantiles only to 1e-9, and at shape 0.2 the first hundredth lies below that.
    @ParameterizedTest
    @ValueSource(doubles = {0.2, 0.5, 1, 2, 25})
    void gamma_quantilesOfTheLibrary_splitTheDraws(double shape) {
        double[] ranks = Arrays.stream(draws(new Gamma(MEAN_NANOS, shape), 1))
                .map(law(shape)::cumulativeProbability)
                .toArray();
        for (double p : new double[] {0.01, 0.1, 0.5, 0.9, 0.99, 0.999}) {
            double below =
                    (double) Arrays.stream(ranks).filter(rank -> rank <= p).count() / DRAWS;
            assertThat(Math.abs(below - p))
                    .as("shape " + shape + ", quantile " + p)
                    .isLessThanOrEqualTo(4 * Math.sqrt(p * (1 - p) / DRAWS));
        }
    }

    // Attempts of one request are drawn apart: pairs of their ranks fill the unit square evenly.
    @Test
    void gamma_attemptsOfOneRequest_areIndependent() {
        Gamma time = new Gamma(MEAN_NANOS, 0.5);
        int cells = 8;
        long[] counts = new long[cells * cells];
        for (int request = 0; request < DRAWS; request++) {
            int row = cell(time.demandNanos(CHANCE, request, 1), cells);
            int column = cell(time.demandNanos(CHANCE, request, 2), cells);
            counts[row * cells + column]++;
        }
        double[] expected = new double[counts.length];
        Arrays.fill(expected, (double) DRAWS / counts.length);
        assertThat(new ChiSquareTest().chiSquareTest(expected, counts)).isGreaterThan(LEAST_P);
    }

    @ParameterizedTest
    @ValueSource(ints = {2, 7, 100, 1_000})
    void trace_sampled_takesEveryTimeEquallyOften(int length) {
        Trace time = new Trace(LongStream.range(0, length).toArray(), Order.SAMPLED);
        long[] counts = new long[length];
        for (int request = 0; request < DRAWS; request++) {
            counts[(int) time.demandNanos(CHANCE, request, 1)]++;
        }
        double[] expected = new double[length];
        Arrays.fill(expected, (double) DRAWS / length);
        assertThat(new ChiSquareTest().chiSquareTest(expected, counts)).isGreaterThan(LEAST_P);
    }

    private static double[] draws(ServiceTime time, int attempt) {
        double[] drawn = new double[DRAWS];
        Arrays.setAll(drawn, request -> (double) time.demandNanos(CHANCE, request, attempt) / MEAN_NANOS);
        return drawn;
    }

    /** With mean 1. */
    private static GammaDistribution law(double shape) {
        return new GammaDistribution(null, shape, 1 / shape);
    }

    private static int cell(long nanos, int cells) {
        double rank = law(0.5).cumulativeProbability((double) nanos / MEAN_NANOS);
        return Math.min(cells - 1, (int) (rank * cells));
    }
}
