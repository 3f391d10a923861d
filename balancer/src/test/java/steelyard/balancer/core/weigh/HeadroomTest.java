package steelyard.balancer.core.weigh;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.LoadSettings.Gauge;

/** Headroom against arithmetic, and where weights that follow it come to rest. */
class HeadroomTest {

    /**
     * Ceilings of 80 % for the processor and 90 % for memory are common practice; the rest is worked out by hand:
     *
     * <pre>
     * cpu 60 %, memory 45 %: 1 - 60/80 = 0.25, 1 - 45/90 = 0.5               -> 250
     * cpu 20 %, memory 81 %: 0.75, 1 - 81/90 = 0.1                           -> 100
     * cpu  0 %, memory  0 %                                                  -> 1000
     * cpu 95 %, memory 10 %: at its ceiling, 0, so the floor                 -> 50
     * cpu 32 %, memory  9 %, gain 2 on cpu: 0.6^2 = 0.36, 0.9                -> 360
     * cpu 76 %, gain 2: 0.05^2 = 0.0025, 2.5 thousandths rounded up          -> 3
     * cpu 90 %, gain 3: the floor, 0.05^3 = 0.000125, at least a thousandth  -> 1
     * cpu 32 %, gain 0.5: sqrt(0.6) = 0.774597                               -> 775
     * cpu -5 % counts as 0                                                   -> 1000
     * </pre>
     */
    @ParameterizedTest
    @CsvSource({
        // cpu, memory, gain of cpu, thousandths
        "0.60, 0.45, 1,   250",
        "0.20, 0.81, 1,   100",
        "0,    0,    1,   1000",
        "0.95, 0.10, 1,   50",
        "0.32, 0.09, 2,   360",
        "0.76, 0.09, 2,   3",
        "0.90, 0.09, 3,   1",
        "0.32, 0.09, 0.5, 775",
        "-0.05,0,    1,   1000",
    })
    void milli_ofTwoGauges_isTheLeastTerm(double cpu, double memory, double gain, int expected) {
        assertThat(Headroom.milli(
                        settings(0.05, new Gauge("cpu", 0.8, gain), new Gauge("memory", 0.9, 1)),
                        new double[] {cpu, memory}))
                .isEqualTo(expected);
    }

    /**
     * Backends of capacities c under load L: weights w give utilisations u_i = L w_i / sum(w) / c_i. Weights that equalise
     * utilisation, w_i = c_i x headroom(u) with the same u for all, are a fixed point: shares c_i / sum(c), every
     * utilisation L / sum(c). From any start, set weights c and the mean of old and new headroom, shares come to rest there
     * within a step of a thousandth of the weights.
     */
    @Test
    void weights_thatFollowHeadroom_comeToRestAtTheSharesOfTheCapacities() {
        LoadSettings settings = settings(0.001, new Gauge("cpu", 1, 1));
        double[] capacity = {1, 2, 5};
        double load = 4;
        double[] headroom = {0.1, 1, 0.5};
        double[] share = new double[3];
        for (int round = 0; round < 200; round++) {
            double sum = 0;
            for (int i = 0; i < 3; i++) {
                sum += capacity[i] * headroom[i];
            }
            for (int i = 0; i < 3; i++) {
                share[i] = capacity[i] * headroom[i] / sum;
                double utilisation = Math.min(1, load * share[i] / capacity[i]);
                headroom[i] += 0.5 * (Headroom.milli(settings, new double[] {utilisation}) / 1e3 - headroom[i]);
            }
        }

        for (int i = 0; i < 3; i++) {
            // Headroom rests at 0.5 give or take a step: shares are within two parts in a thousand of c / sum(c).
            assertThat(share[i] / (capacity[i] / 8)).isBetween(0.996, 1.004);
            assertThat(load * share[i] / capacity[i]).isBetween(0.498, 0.502);
        }
    }

    private static LoadSettings settings(double floor, Gauge... gauges) {
        List<Gauge> all = Arrays.asList(gauges);
        return new LoadSettings("/load", 100, 40, 300, floor, all);
    }
}
