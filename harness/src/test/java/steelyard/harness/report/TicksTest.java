package steelyard.harness.report;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class TicksTest {
    @ParameterizedTest
    @CsvSource({
        "0, 10, '0.0, 2.0, 4.0, 6.0, 8.0, 10.0'",
        "3, 4.1, '3.0, 3.5, 4.0, 4.5'",
        "0, 0.007, '0.0, 0.002, 0.004, 0.006, 0.008'",
        "-3, 1, '-3.0, -2.0, -1.0, 0.0, 1.0'",
        "5, 5, '2.0, 3.0, 4.0, 5.0, 6.0, 7.0, 8.0'",
        "0, 0, '0.0, 0.2, 0.4, 0.6, 0.8, 1.0'"
    })
    void of_valuesNearEachOther_spansThemInRoundSteps(double least, double most, String marks) {
        Ticks ticks = Ticks.of(least, most);
        assertThat(ticks.log()).isFalse();
        assertThat(ticks.list().toString()).isEqualTo("[" + marks + "]");
    }

    @Test
    void of_valuesFarApart_isLogarithmicAndKeepsOffTheEdges() {
        Ticks ticks = Ticks.of(0.003, 0.19);
        assertThat(ticks.log()).isTrue();
        assertThat(ticks.list()).containsExactly(0.002, 0.005, 0.01, 0.02, 0.05, 0.1, 0.2);
        assertThat(ticks.part(0.002)).isZero();
        assertThat(ticks.part(0.02)).isBetween(0.499, 0.501);
        assertThat(Ticks.of(1, 20).from()).isEqualTo(0.5);
        assertThat(Ticks.of(1, 1e6).list()).hasSizeLessThan(11);
    }
}
