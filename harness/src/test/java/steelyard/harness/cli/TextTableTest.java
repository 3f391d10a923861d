package steelyard.harness.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;

class TextTableTest {
    private static final List<String> HEAD = List.of("measure", "median", "");
    private static final List<List<String>> ROWS =
            List.of(List.of("failed, whole play", "0.2 %", "met"), List.of("cut", "12", "not met"));

    @Test
    void table_thatFits_hasItsNumbersToTheRight() {
        assertThat(TextTable.lines(HEAD, ROWS, 80))
                .containsExactly(
                        "measure             median",
                        "failed, whole play   0.2 %  met",
                        "cut                     12  not met");
    }

    @Test
    void table_thatIsTooWide_isStackedBehindItsOutcomes() {
        assertThat(TextTable.lines(HEAD, ROWS, 24))
                .containsExactly("met: failed, whole play", "  median  0.2 %", "not met: cut", "  median  12");
        assertThat(TextTable.lines(HEAD, List.of(List.of("retry-load, whole play", "1", "")), 24))
                .containsExactly("retry-load, whole play", "  median  1");
        assertThat(TextTable.lines(List.of("cell", "median", ""), List.of(List.of("7", "0.2 %", "taken")), 16))
                .containsExactly("taken: cell 7", "  median  0.2 %");
    }
}
