package steelyard.harness.report;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class LastResortTest {

    /** The tiny run with its slices changed; the row of slice n is line n + 1. */
    private static RunFiles run(Path folder, int fromSlice, int toSlice, String what, String with) throws IOException {
        TinyRun.write(folder);
        List<String> lines = Files.readAllLines(folder.resolve("slices.csv"));
        for (int slice = fromSlice; slice <= toSlice; slice++) {
            lines.set(slice + 1, lines.get(slice + 1).replace(what, with));
        }
        Files.write(folder.resolve("slices.csv"), lines);
        return RunFiles.read(folder);
    }

    @Test
    void html_illAndEntitledAllTheSame_saysFromWhenToWhen(@TempDir Path folder) throws IOException {
        // The samples of slices 4 to 6 were taken at 0.5, 0.6 and 0.7 s.
        assertThat(LastResort.html(run(folder, 4, 6, ",up,", ",down,"))).contains("from 0.5 s to 0.7 s.</p>");
    }

    @Test
    void html_toTheEnd_endsWithTheLastSample(@TempDir Path folder) throws IOException {
        assertThat(LastResort.html(run(folder, 8, 9, ",up,", ",benched,"))).contains("from 0.9 s to 1 s.</p>");
    }

    @Test
    void html_illWithoutAShare_isNoLastResort(@TempDir Path folder) throws IOException {
        assertThat(LastResort.html(run(folder, 4, 6, ",up,1.0,0.5,", ",down,1.0,0.0,")))
                .isEmpty();
    }

    @Test
    void html_nobodyIll_isEmpty(@TempDir Path folder) throws IOException {
        assertThat(LastResort.html(RunFiles.read(TinyRun.write(folder)))).isEmpty();
    }
}
