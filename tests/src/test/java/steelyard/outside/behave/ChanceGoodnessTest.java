package steelyard.outside.behave;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.function.IntToDoubleFunction;
import org.apache.commons.math3.distribution.ExponentialDistribution;
import org.apache.commons.math3.distribution.NormalDistribution;
import org.apache.commons.math3.distribution.RealDistribution;
import org.apache.commons.math3.distribution.UniformRealDistribution;
import org.apache.commons.math3.stat.inference.ChiSquareTest;
import org.apache.commons.math3.stat.inference.KolmogorovSmirnovTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Stream;

/**
 * Keyed draws against the laws that they claim, by the tests of Kolmogorov-Smirnov and Pearson as Apache Commons Math
 * computes them. The seed is fixed and was chosen beforehand; a p value below 1e-4 would be a finding.
 */
class ChanceGoodnessTest {

    private static final Chance CHANCE = new Chance(20_241);
    private static final double LEAST_P = 1e-4;
    private static final int DRAWS = 100_000;
    private static final int CELLS = 16;

    @ParameterizedTest
    @EnumSource(Stream.class)
    void unit_overRequests_isUniform(Stream stream) {
        fits(new UniformRealDistribution(0, 1), i -> CHANCE.unit(stream, i, 0));
    }

    @Test
    void unit_overAttemptsAndOverSeeds_isUniform() {
        fits(new UniformRealDistribution(0, 1), i -> CHANCE.unit(Stream.PICK, 5, i));
        fits(new UniformRealDistribution(0, 1), i -> new Chance(i).unit(Stream.PICK, 5, 0));
    }

    @Test
    void exponential_isExponential() {
        fits(new ExponentialDistribution(null, 1), i -> CHANCE.exponential(Stream.ARRIVALS, i, 0));
    }

    @Test
    void normal_isNormal() {
        fits(new NormalDistribution(null, 0, 1), i -> CHANCE.normal(Stream.SERVICE, i, 0));
    }

    @Test
    void bits_eachOfThem_isSetHalfTheTime() {
        long[] set = new long[Long.SIZE];
        for (int i = 0; i < DRAWS; i++) {
            long bits = CHANCE.bits(Stream.MIX, i, 0);
            for (int bit = 0; bit < Long.SIZE; bit++) {
                set[bit] += bits >>> bit & 1;
            }
        }
        // Binomial: 5 standard deviations, for the worst of 64.
        double widest = 5 * Math.sqrt(DRAWS * 0.25);
        assertThat(Arrays.stream(set).mapToDouble(count -> Math.abs(count - DRAWS / 2.0)))
                .allMatch(off -> off <= widest);
    }

    /** Two draws whose keys differ in one place only fill the unit square evenly. */
    @Test
    void neighbours_inAnyKey_areIndependent() {
        independent(i -> CHANCE.unit(Stream.ARRIVALS, i, 0), i -> CHANCE.unit(Stream.ARRIVALS, i + 1, 0));
        independent(i -> CHANCE.unit(Stream.SERVICE, i, 0), i -> CHANCE.unit(Stream.SERVICE, i, 1));
        independent(i -> CHANCE.unit(Stream.ARRIVALS, i, 0), i -> CHANCE.unit(Stream.SERVICE, i, 0));
        independent(i -> new Chance(i).unit(Stream.PICK, 0, 0), i -> new Chance(i + 1).unit(Stream.PICK, 0, 0));
        independent(i -> CHANCE.unit(Stream.PICK, i, 1), i -> CHANCE.unit(Stream.PICK, 1, i));
        independent(i -> CHANCE.unit(Stream.FAULT, i, 0), i -> CHANCE.unit(Stream.FAULT, -1 - i, 0));
    }

    private static void fits(RealDistribution law, IntToDoubleFunction draw) {
        double[] drawn = new double[DRAWS];
        Arrays.setAll(drawn, draw);
        assertThat(new KolmogorovSmirnovTest().kolmogorovSmirnovTest(law, drawn))
                .isGreaterThan(LEAST_P);
    }

    private static void independent(IntToDoubleFunction one, IntToDoubleFunction other) {
        long[] counts = new long[CELLS * CELLS];
        for (int i = 0; i < DRAWS; i++) {
            int row = (int) (one.applyAsDouble(i) * CELLS);
            int column = (int) (other.applyAsDouble(i) * CELLS);
            counts[row * CELLS + column]++;
        }
        double[] expected = new double[counts.length];
        Arrays.fill(expected, (double) DRAWS / counts.length);
        assertThat(new ChiSquareTest().chiSquareTest(expected, counts)).isGreaterThan(LEAST_P);
    }
}
