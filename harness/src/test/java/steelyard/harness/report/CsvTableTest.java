package steelyard.harness.report;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import org.junit.jupiter.api.Test;

class CsvTableTest {
    @Test
    void parse_quotedFields_areUnquoted() throws IOException {
        CsvTable table = CsvTable.parse("cues.csv", "at,cue\r\n1.5,\"a, \"\"b\"\"\nc\"\r\n,\r\n");

        assertThat(table.words("cue")).containsExactly("a, \"b\"\nc", "");
        assertThat(table.numbers("at")).containsExactly(1.5, Double.NaN);
    }

    @Test
    void parse_lastRowCutShort_isLeftOut() throws IOException {
        CsvTable table = CsvTable.parse("slices.csv", "a,b,c\n1,2,3\n4,5");

        assertThat(table.size()).isEqualTo(1);
        assertThat(table.numbers("b")).containsExactly(2);
    }

    @Test
    void numbers_ofAWord_namesFileRowAndColumn() throws IOException {
        CsvTable table = CsvTable.parse("slices.csv", "a,b\n1,2\n3,x\n");

        assertThatThrownBy(() -> table.numbers("b"))
                .isInstanceOf(IOException.class)
                .hasMessage("slices.csv, row 3, b: not a number: x");
    }

    @Test
    void words_ofAColumnThatIsNotThere_namesIt() throws IOException {
        CsvTable table = CsvTable.parse("cues.csv", "at\n");

        assertThatThrownBy(() -> table.words("cue")).hasMessage("cues.csv: no column cue");
        assertThatThrownBy(() -> CsvTable.parse("cues.csv", "")).hasMessageContaining("cues.csv: empty");
    }
}
