package steelyard.harness.console;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.PrintWriter;
import java.io.StringWriter;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class ProgressTest {
    @Test
    void bar_halfWay_isHalfFullAndSaysTheTimeLeft() {
        assertThat(ProgressBar.line(100, 200, "plays", 8_000, 79))
                .isEqualTo("[####################....................]  100 of 200 plays, 8 s left");
    }

    @Test
    void bar_atItsEnds_saysNoTimeLeft() {
        assertThat(ProgressBar.line(0, 200, "plays", 0, 79))
                .endsWith("]  0 of 200 plays")
                .contains("[....");
        assertThat(ProgressBar.line(200, 200, "plays", 9_000, 79)).endsWith("#]  200 of 200 plays");
    }

    @Test
    void bar_ofAnHour_countsMinutes() {
        assertThat(ProgressBar.line(10, 1_000, "plays", 60_000, 100)).endsWith("10 of 1,000 plays, 99 min left");
    }

    @ParameterizedTest
    @ValueSource(ints = {10, 20, 30, 34, 40, 200})
    void bar_ofAnyWidth_fits(int width) {
        assertThat(ProgressBar.line(87, 100_000, "plays", 12_345, width)).hasSizeLessThanOrEqualTo(width);
    }

    @Test
    void plainProgress_ofManyPlays_isALineATenth() {
        StringWriter out = new StringWriter();
        PlainProgress progress = new PlainProgress("A drill", "plays", 25, new PrintWriter(out));
        progress.begin();
        for (int done = 1; done <= 25; done++) {
            progress.at(done);
        }
        progress.close();
        assertThat(out.toString().lines())
                .hasSize(11)
                .startsWith("A drill", "3 of 25 plays", "5 of 25 plays")
                .endsWith("25 of 25 plays");
    }
}
