package steelyard.harness.report;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.harness.report.Readings.Gap;

class ReadingsTest {
    private static final String HEAD = "at,backend,reading,headroom,fresh\n";

    private static RunFiles byLoad(Path folder, String rows) throws IOException {
        TinyRun.write(folder, TinyRun.RUN.replace("\"weights\": \"backend\"", "\"weights\": \"load\""));
        Files.writeString(folder.resolve("readings.csv"), HEAD + rows);
        return RunFiles.read(folder);
    }

    @Test
    void of_changes_areStretchesFromOneToTheNext(@TempDir Path folder) throws IOException {
        // Fulmar is without a reading from 0.2 s to 0.3 s and again from 0.7 s to the end at 1 s, gannet to 0.5 s.
        RunFiles run = byLoad(folder, """
                0.050000,fulmar,0,0.900,true
                0.120000,gannet,0,0.900,true
                0.200000,fulmar,3,1.000,false
                0.250000,gannet,3,1.000,false
                0.300000,fulmar,5,0.700,true
                0.500000,gannet,5,0.600,true
                0.700000,fulmar,5,1.000,false
                """);

        assertThat(Readings.of(run))
                .containsExactly(
                        new Gap("fulmar", 0.2, 0.3, true),
                        new Gap("gannet", 0.25, 0.5, true),
                        new Gap("fulmar", 0.7, 1, false));
        assertThat(Readings.html(run).replaceAll("<[^>]+>", " ").replaceAll("\\s+", " "))
                .contains("until the first readings came, from 0.05 s to 0.12 s.")
                .contains("fulmar 2 0.200 the end 0.4", "gannet 1 0.250 0.500 0.3");
    }

    @Test
    void html_noneMissing_hasNoTable(@TempDir Path folder) throws IOException {
        assertThat(Readings.html(byLoad(folder, "0.05,fulmar,0,0.9,true\n0.07,gannet,0,0.9,true\n")))
                .contains("from 0.05 s to 0.07 s.")
                .doesNotContain("<table");
    }

    @Test
    void html_someOrAllNeverRead_saysSo(@TempDir Path folder) throws IOException {
        assertThat(Readings.html(byLoad(folder, "0.05,fulmar,0,0.9,true\n")))
                .contains("never read")
                .contains(">gannet<")
                .doesNotContain(">fulmar<");
        assertThat(Readings.html(byLoad(folder, ""))).contains("No reading of the load came");
    }

    @Test
    void html_weightsAreSet_isEmpty(@TempDir Path folder) throws IOException {
        assertThat(Readings.html(RunFiles.read(TinyRun.write(folder)))).isEmpty();
    }
}
