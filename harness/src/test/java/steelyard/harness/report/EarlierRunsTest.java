package steelyard.harness.report;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunFolder;

/**
 * Runs that were recorded before pools could weigh by load, let requests wait or pass connections on: they stay readable.
 */
class EarlierRunsTest {
    private static final List<String> FILES =
            List.of("run.json", "machine.json", "slices.csv", "standing.csv", "cues.csv", "latency.hlog");

    private static Path copy(String sample, Path folder) throws IOException {
        for (String name : FILES) {
            try (InputStream in =
                    EarlierRunsTest.class.getResourceAsStream("/steelyard/harness/record/" + sample + "/" + name)) {
                Files.copy(in, folder.resolve(name));
            }
        }
        return folder;
    }

    @Test
    void rehearsal_ofAnEarlierVersion_isReadAndReported(@TempDir Path folder) throws Exception {
        RunData run = RunData.read(RunFolder.existing(copy("earlier-run", folder)));

        // Three seconds, and the slice in which the last answers came.
        assertThat(run.slices().rows()).isEqualTo(31);
        assertThat(run.slices().numbers("gannet", "picked")).hasSize(31);
        assertThat(run.slices().has("fulmar:headroom")).isFalse();
        assertThat(run.readings()).isEmpty();
        assertThat(run.pools()).singleElement().satisfies(pool -> {
            assertThat(pool.weighsByLoad()).isFalse();
            assertThat(pool.passesOctets()).isFalse();
        });
        assertThat(run.verdict().met()).isTrue();
        assertThat(Files.readString(Report.write(folder)))
                .contains("Lose one of two, in short", "fulmar dies")
                .doesNotContain("<h2>Readings</h2>");
    }

    @Test
    void forecast_ofAnEarlierVersion_isReadAndReported(@TempDir Path folder) throws Exception {
        RunData run = RunData.read(RunFolder.existing(copy("earlier-forecast", folder)));

        assertThat(run.forecast().plays()).isEqualTo(3);
        assertThat(run.slices().numbers("gannet:share:low")).hasSize(30);
        assertThat(Files.readString(Report.write(folder))).contains("Forecast by 3 plays in virtual time");
    }
}
