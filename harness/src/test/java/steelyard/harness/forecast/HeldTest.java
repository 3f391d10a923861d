package steelyard.harness.forecast;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import org.apache.commons.math3.distribution.BinomialDistribution;
import org.apache.commons.math3.stat.interval.ConfidenceInterval;
import org.apache.commons.math3.stat.interval.IntervalUtils;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class HeldTest {
    /** In closed form where all held or none: the chance p with p^n = 2.5 %. */
    @ParameterizedTest
    @ValueSource(ints = {1, 20, 200, 5000})
    void interval_whereAllHeldOrNone_hasItsClosedForm(int plays) {
        double end = Math.pow(0.025, 1.0 / plays);
        Held all = Held.of(plays, plays);
        assertThat(all.low()).isCloseTo(end, within(1e-9));
        assertThat(all.high()).isEqualTo(1);
        Held none = Held.of(0, plays);
        assertThat(none.low()).isEqualTo(0);
        assertThat(none.high()).isCloseTo(1 - end, within(1e-9));
    }

    @ParameterizedTest
    @CsvSource({"198, 200", "180, 200", "1, 3", "77, 100"})
    void interval_ofACount_agreesWithAnotherLibrary(int count, int plays) {
        Held held = Held.of(count, plays);
        ConfidenceInterval other = IntervalUtils.getClopperPearsonInterval(plays, count, 0.95);
        assertThat(held.low()).isCloseTo(other.getLowerBound(), within(1e-6));
        assertThat(held.high()).isCloseTo(other.getUpperBound(), within(1e-6));
        assertThat(held.share()).isEqualTo((double) count / plays);
    }

    /** Summed over every count that can come: the chance that the interval holds the truth is never below 95 %. */
    @ParameterizedTest
    @ValueSource(ints = {5, 40, 200})
    void interval_atEveryTruth_coversItInAtLeast95PerCent(int plays) {
        double tightest = 1;
        for (double truth = 0.01; truth < 1; truth += 0.007) {
            BinomialDistribution counts = new BinomialDistribution(null, plays, truth);
            double covered = 0;
            for (int count = 0; count <= plays; count++) {
                Held held = Held.of(count, plays);
                covered += held.low() <= truth && truth <= held.high() ? counts.probability(count) : 0;
            }
            tightest = Math.min(tightest, covered);
        }
        assertThat(tightest).isBetween(0.95, 0.985);
    }

    /** The same by lot, with a seed that was fixed beforehand. */
    @Test
    void interval_ofSimulatedForecasts_coversTheTruthInAtLeast95PerCent() {
        SplittableRandom random = new SplittableRandom(2026);
        int forecasts = 5_000;
        int covered = 0;
        for (int forecast = 0; forecast < forecasts; forecast++) {
            int held = 0;
            for (int play = 0; play < 100; play++) {
                held += random.nextDouble() < 0.93 ? 1 : 0;
            }
            Held found = Held.of(held, 100);
            covered += found.low() <= 0.93 && 0.93 <= found.high() ? 1 : 0;
        }
        assertThat((double) covered / forecasts).isGreaterThan(0.95 - 4 * Math.sqrt(0.95 * 0.05 / forecasts));
    }

    @Test
    void share_exactlyAtTheHold_reachesIt() {
        assertThat(Held.of(180, 200).reaches(0.9)).isTrue();
        assertThat(Held.of(179, 200).reaches(0.9)).isFalse();
        assertThat(Held.of(7, 10).reaches(0.7)).isTrue();
        assertThat(Held.of(29, 100).reaches(0.29)).isTrue();
        assertThat(Held.of(0, 10).reaches(0)).isTrue();
        assertThat(Held.of(9, 10).reaches(1)).isFalse();
    }
}
