package steelyard.harness.record;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Measure.Unit;

class WordingTest {

    @ParameterizedTest
    @CsvSource({
        "DURATION, 250000000, 250 ms",
        "DURATION, 2630400000, 2.63 s",
        "DURATION, 400000, 0.4 ms",
        "DURATION, 0, 0 s",
        "DURATION, 123456000000, 123 s",
        "DURATION, 1234567000000, 1235 s",
        "SHARE, 0.003, 0.3 %",
        "SHARE, 0.33333, 33.3 %",
        "SHARE, 0.000123456, 0.0123 %",
        "SHARE, 1, 100 %",
        "SHARE, 0, 0 %",
        "COUNT, 12345, 12345",
        "NUMBER, 0.998765, 0.9988",
        "NUMBER, 1, 1"
    })
    void value_ofUnit_isRoundedForReading(Unit unit, double value, String words) {
        assertThat(Wording.value(unit, value)).isEqualTo(words);
    }

    @Test
    void bound_ofEachShape_isInWordsAndInFull() {
        double none = Double.POSITIVE_INFINITY;
        assertThat(Wording.bound(Unit.SHARE, new Bound(-none, 0.003))).isEqualTo("at most 0.3 %");
        assertThat(Wording.bound(Unit.COUNT, new Bound(3, none))).isEqualTo("at least 3");
        assertThat(Wording.bound(Unit.DURATION, new Bound(1.9e9, 3.2345e9))).isEqualTo("from 1.9 s to 3.2345 s");
        assertThat(Wording.bound(Unit.COUNT, new Bound(0, 0))).isEqualTo("exactly 0");
        assertThat(Wording.bound(Unit.COUNT, new Bound(-none, none))).isEqualTo("anything");
    }
}
