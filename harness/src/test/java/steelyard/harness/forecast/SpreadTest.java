package steelyard.harness.forecast;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import java.util.stream.IntStream;
import org.apache.commons.math3.stat.descriptive.rank.Percentile;
import org.apache.commons.math3.stat.descriptive.rank.Percentile.EstimationType;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class SpreadTest {
    private static double[] upTo(int n) {
        return IntStream.rangeClosed(1, n).mapToDouble(each -> each).toArray();
    }

    /** p (n + 1) by hand: 0.05 x 40 = 2, 0.95 x 40 = 38, 0.025 x 40 = 1, 0.5 x 40 = 20. */
    @Test
    void spread_ofOneTo39_isAtTheHandWorkedPlaces() {
        assertThat(Spread.of(upTo(39))).isEqualTo(new Spread(39, 0, 20, 2, 38, 1, 39, 1, 39));
    }

    /** 0.05 x 30 = 1.5 and 0.95 x 30 = 28.5 lie half way; 0.025 x 30 is below 1, so that it is the least. */
    @Test
    void spread_betweenTwoValues_isInterpolated() {
        double[] values = upTo(29);
        values[1] = 4;
        Spread spread = Spread.of(values);
        assertThat(spread.low90()).isEqualTo((1 + 3) / 2.0);
        assertThat(spread.high90()).isEqualTo(28.5);
        assertThat(spread.low95()).isEqualTo(1);
        assertThat(spread.high95()).isEqualTo(29);
        assertThat(spread.median()).isEqualTo(15);
    }

    @Test
    void spread_ofFewPlays_isLeastToMost() {
        assertThat(Spread.of(new double[] {30, 10})).isEqualTo(new Spread(2, 0, 20, 10, 30, 10, 30, 10, 30));
        assertThat(Spread.of(new double[] {7})).isEqualTo(new Spread(1, 0, 7, 7, 7, 7, 7, 7, 7));
        assertThat(Spread.of(new double[] {7, 7}).constant()).isTrue();
    }

    @Test
    void spread_withPlaysWithoutAValue_leavesThemOutAndCountsThem() {
        Spread spread = Spread.of(new double[] {Double.NaN, 3, 1, Double.NaN, 2});
        assertThat(spread.undefined()).isEqualTo(2);
        assertThat(spread.plays()).isEqualTo(5);
        assertThat(spread.median()).isEqualTo(2);
    }

    @Test
    void spread_withoutAnyValue_isUndefined() {
        Spread spread = Spread.of(new double[] {Double.NaN, Double.NaN});
        assertThat(spread.undefined()).isEqualTo(2);
        assertThat(spread.median()).isNaN();
        assertThat(spread.most()).isNaN();
        assertThat(spread.constant()).isFalse();
    }

    /** The same type of quantile in another library. */
    @ParameterizedTest
    @ValueSource(ints = {1, 2, 10, 37, 200, 1001})
    void spread_ofRandomValues_agreesWithAnotherLibrary(int size) {
        SplittableRandom random = new SplittableRandom(20 + size);
        double[] values = random.doubles(size).toArray();
        Percentile other = new Percentile().withEstimationType(EstimationType.R_6);
        other.setData(values);
        Spread spread = Spread.of(values);
        assertThat(spread.low95()).isCloseTo(other.evaluate(2.5), within(1e-12));
        assertThat(spread.low90()).isCloseTo(other.evaluate(5), within(1e-12));
        assertThat(spread.median()).isCloseTo(other.evaluate(50), within(1e-12));
        assertThat(spread.high90()).isCloseTo(other.evaluate(95), within(1e-12));
        assertThat(spread.high95()).isCloseTo(other.evaluate(97.5), within(1e-12));
    }

    /** What the bands are read as: one more play falls inside with that chance. 4 standard errors of 20,000 draws. */
    @ParameterizedTest
    @ValueSource(ints = {39, 79, 199})
    void bands_ofPlays_holdOneMorePlayAsOftenAsTheySay(int plays) {
        SplittableRandom random = new SplittableRandom(7);
        int trials = 20_000;
        int in90 = 0;
        int in95 = 0;
        for (int trial = 0; trial < trials; trial++) {
            double[] values = new double[plays];
            for (int play = 0; play < plays; play++) {
                values[play] = -Math.log(1 - random.nextDouble());
            }
            double further = -Math.log(1 - random.nextDouble());
            Spread spread = Spread.of(values);
            in90 += further >= spread.low90() && further <= spread.high90() ? 1 : 0;
            in95 += further >= spread.low95() && further <= spread.high95() ? 1 : 0;
        }
        assertThat((double) in90 / trials).isCloseTo(0.90, within(4 * Math.sqrt(0.9 * 0.1 / trials)));
        assertThat((double) in95 / trials).isCloseTo(0.95, within(4 * Math.sqrt(0.95 * 0.05 / trials)));
    }
}
