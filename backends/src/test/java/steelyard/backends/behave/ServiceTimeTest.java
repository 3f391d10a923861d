package steelyard.backends.behave;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import steelyard.backends.behave.Change.Slow;
import steelyard.backends.behave.ServiceTime.Exponential;
import steelyard.backends.behave.ServiceTime.Fixed;
import steelyard.backends.behave.ServiceTime.Lognormal;

class ServiceTimeTest {

    private static final long MILLI = 1_000_000;
    private static final int DRAWS = 200_000;
    private static final Chance CHANCE = new Chance(11);

    @Test
    void fixed_everyRequest_theSame() {
        assertThat(new Fixed(5).demandNanos(CHANCE, 9, 2)).isEqualTo(5);
        assertThat(new Fixed(5).squaredVariation()).isZero();
    }

    // Standard error of the mean: 1 / sqrt(200,000) = 0.22 % of it; 4 of them are 0.9 %.
    @Test
    void exponential_manyDraws_hasItsMean() {
        assertThat(meanOf(new Exponential(10 * MILLI))).isCloseTo(10 * MILLI, within(0.009 * 10 * MILLI));
    }

    // Median 12, 99 % at 60: sigma = ln 5 / 2.32635 = 0.69183, mean = 12 exp(sigma^2 / 2) = 15.244,
    // c2 = exp(sigma^2) - 1 = 0.6139; standard error of the mean 0.78 / sqrt(200,000) = 0.18 %.
    @Test
    void lognormal_manyDraws_hasItsQuantilesAndMean() {
        Lognormal law = new Lognormal(12 * MILLI, 60 * MILLI);
        assertThat(law.sigma()).isCloseTo(0.69183, within(1e-5));
        assertThat(law.meanNanos()).isCloseTo(15.244 * MILLI, within(0.001 * MILLI));
        assertThat(law.squaredVariation()).isCloseTo(0.6139, within(1e-4));
        assertThat(meanOf(law)).isCloseTo(law.meanNanos(), within(0.007 * law.meanNanos()));
        // Binomial: 4 sqrt(p (1 - p) / n).
        assertThat(shareAbove(law, 12 * MILLI)).isCloseTo(0.5, within(0.0045));
        assertThat(shareAbove(law, 60 * MILLI)).isCloseTo(0.01, within(0.0009));
    }

    @Test
    void demand_beyondADay_isADay() {
        Lognormal wide = new Lognormal(1, ServiceTime.LONGEST_NANOS);
        for (long request = 0; request < 10_000; request++) {
            assertThat(wide.demandNanos(CHANCE, request, 0)).isBetween(0L, ServiceTime.LONGEST_NANOS);
        }
        assertThat(new Slow(1e300, 0, false).slowed(1)).isEqualTo(ServiceTime.LONGEST_NANOS);
    }

    @Test
    void routeDelay_uniformAndLognormal_addToTheFixedPart() {
        RouteDelay uniform = new RouteDelay(100, RouteDelay.Law.UNIFORM, 10, 20);
        RouteDelay lognormal = new RouteDelay(100, RouteDelay.Law.LOGNORMAL, 1_000, 0);
        for (long request = 0; request < 1_000; request++) {
            assertThat(uniform.nanos(CHANCE, request, 0)).isBetween(110L, 120L);
            assertThat(lognormal.nanos(CHANCE, request, 0)).isEqualTo(1_100);
        }
        assertThat(RouteDelay.NOTHING.nanos(CHANCE, 1, 1)).isZero();
    }

    @Test
    void settings_outOfRange_saySoWithTheValue() {
        assertThatIllegalArgumentException().isThrownBy(() -> new Fixed(-1)).withMessageContaining("-1");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new Lognormal(20, 10))
                .withMessageContaining("20");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> BehaviourSettings.of(0, 1, new Fixed(1)))
                .withMessage("workers must be 1 or more, but is 0");
        assertThatIllegalArgumentException().isThrownBy(() -> new Slow(-1, 0, false));
        assertThatIllegalArgumentException().isThrownBy(() -> new Slow(Double.NaN, 0, false));
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new Change.Fail(1.1, 500, Change.When.AT_ONCE, false))
                .withMessageContaining("1.1");
        assertThatIllegalArgumentException().isThrownBy(() -> new Change.FlapProbe(1));
    }

    private static double meanOf(ServiceTime law) {
        double sum = 0;
        for (int request = 0; request < DRAWS; request++) {
            sum += law.demandNanos(CHANCE, request, 0);
        }
        return sum / DRAWS;
    }

    private static double shareAbove(ServiceTime law, long nanos) {
        int above = 0;
        for (int request = 0; request < DRAWS; request++) {
            above += law.demandNanos(CHANCE, request, 0) > nanos ? 1 : 0;
        }
        return (double) above / DRAWS;
    }
}
