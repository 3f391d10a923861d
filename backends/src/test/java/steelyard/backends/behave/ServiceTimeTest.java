package steelyard.backends.behave;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.stream.LongStream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.backends.behave.Change.Slow;
import steelyard.backends.behave.ServiceTime.Exponential;
import steelyard.backends.behave.ServiceTime.Fixed;
import steelyard.backends.behave.ServiceTime.Gamma;
import steelyard.backends.behave.ServiceTime.Lognormal;
import steelyard.backends.behave.ServiceTime.Order;

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

    // Shape k: variance over squared mean 1 / k; standard error of the mean sqrt(1 / k / 200,000), 4 of them at shape
    // 0.5 are
    // 1.3 %.
    @ParameterizedTest
    @ValueSource(doubles = {0.05, 0.5, 1, 2, 30})
    void gamma_manyDraws_hasItsMeanAndVariation(double shape) {
        Gamma law = new Gamma(10 * MILLI, shape);
        double mean = meanOf(law);
        assertThat(mean).isCloseTo(10 * MILLI, within(4 * 10 * MILLI * Math.sqrt(1 / shape / DRAWS)));
        assertThat(law.squaredVariation()).isEqualTo(1 / shape);
        assertThat(law.meanNanos()).isEqualTo(10 * MILLI);
    }

    @Test
    void gamma_sameKey_sameDrawAndAnyOtherKeyAnother() {
        Gamma law = new Gamma(10 * MILLI, 0.5);
        assertThat(law.demandNanos(new Chance(11), 4, 1)).isEqualTo(law.demandNanos(CHANCE, 4, 1));
        assertThat(law.demandNanos(CHANCE, 4, 2)).isNotEqualTo(law.demandNanos(CHANCE, 4, 1));
        assertThat(law.demandNanos(CHANCE, 5, 1)).isNotEqualTo(law.demandNanos(CHANCE, 4, 1));
    }

    @Test
    void trace_replayed_goesByRequestFromTheStartAgainAndIsTheSameForEveryAttempt() {
        ServiceTime.Trace law = new ServiceTime.Trace(new long[] {5, 7, 9}, Order.REPLAYED);
        assertThat(LongStream.range(0, 7).map(request -> law.demandNanos(CHANCE, request, 1)))
                .containsExactly(5L, 7L, 9L, 5L, 7L, 9L, 5L);
        assertThat(law.demandNanos(CHANCE, 4, 2)).isEqualTo(7);
        // A request that carried no number has one below 0: -1 is the one before 0.
        assertThat(law.demandNanos(CHANCE, -1, 1)).isEqualTo(9);
    }

    @Test
    void trace_sampled_isDrawnByRequestAndAttempt() {
        ServiceTime.Trace law = new ServiceTime.Trace(new long[] {5, 7, 9, 11}, Order.SAMPLED);
        for (long request = 0; request < 1_000; request++) {
            int drawn = (int) (4 * CHANCE.unit(Stream.SERVICE, request, 1));
            assertThat(law.demandNanos(CHANCE, request, 1)).isEqualTo(5 + 2 * drawn);
        }
    }

    // Mean 4, squared deviations 4 and 4: variance 4, over 16.
    @Test
    void trace_anyOrder_hasTheMomentsOfItsTimes() {
        ServiceTime.Trace law = new ServiceTime.Trace(new long[] {2, 6}, Order.SAMPLED);
        assertThat(law.meanNanos()).isEqualTo(4);
        assertThat(law.squaredVariation()).isEqualTo(0.25);
    }

    @Test
    void trace_changedFromOutside_staysAsItWas() {
        long[] times = {5, 7};
        ServiceTime.Trace law = new ServiceTime.Trace(times, Order.REPLAYED);
        times[0] = 99;
        law.nanos()[1] = 99;
        assertThat(law).isEqualTo(new ServiceTime.Trace(new long[] {5, 7}, Order.REPLAYED));
        assertThat(law).isNotEqualTo(new ServiceTime.Trace(new long[] {5, 7}, Order.SAMPLED));
    }

    // 10 * (1 + 2 exp(-t)) at t = 0 and t = 1 decay: 30 and 10 + 20 / e = 17.3576.
    @Test
    void cold_factorDecays_fromItsFullValueTowardsOne() {
        Cold cold = new Cold(3, 5 * MILLI);
        assertThat(cold.slowed(10 * MILLI, 0)).isEqualTo(30 * MILLI);
        assertThat(cold.slowed(10 * MILLI, 5 * MILLI)).isEqualTo(17_357_589);
        assertThat(cold.slowed(10 * MILLI, 1_000 * MILLI)).isEqualTo(10 * MILLI);
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
        assertThatIllegalArgumentException().isThrownBy(() -> new Gamma(5, 0)).withMessageContaining("0.0");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new ServiceTime.Trace(new long[0], Order.SAMPLED))
                .withMessageContaining("has none");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new ServiceTime.Trace(new long[] {1, -4}, Order.SAMPLED))
                .withMessageContaining("-4");
        assertThatIllegalArgumentException().isThrownBy(() -> new Cold(0.5, 1)).withMessageContaining("0.5");
        assertThatIllegalArgumentException().isThrownBy(() -> new Cold(2, 0));
        assertThatIllegalArgumentException()
                .isThrownBy(() -> Gauge.constant("cpu", 0.5))
                .withMessageContaining("busy share");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> Gauge.constant("two words", 0.5))
                .withMessageContaining("two words");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> Gauge.constant("memory", 1.5))
                .withMessageContaining("1.5");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new LoadPage(0, List.of(Gauge.constant("disk", 0), Gauge.constant("disk", 1))))
                .withMessageContaining("disk is there twice");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new Change.Fill(-0.1))
                .withMessageContaining("-0.1");
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
