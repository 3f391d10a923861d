package steelyard.harness.report;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class ReportTest {
    private static final String VERDICT =
            "{\"met\": false, \"fit\": true, \"text\": \"Not met: 1 of 1; worst: failed\"}";

    @TempDir
    Path folder;

    private String page(String run) throws IOException {
        return Files.readString(Report.write(TinyRun.write(folder, run)));
    }

    @Test
    void write_ofARun_makesOnePageThatNeedsNothingElse() throws IOException {
        String page = page(TinyRun.RUN);

        assertThat(page).startsWith("<!doctype html>").contains("uPlot", "Permission is hereby granted");
        assertThat(page).doesNotContain("<script src", "<link rel=\"stylesheet", "@import", "url(http", "{{");
        assertThat(Files.list(folder)).noneMatch(file -> file.toString().endsWith(".part"));
    }

    @Test
    void write_twice_givesTheSameBytesWithoutTheWallClock() throws IOException {
        String first = page(TinyRun.RUN);

        assertThat(page(TinyRun.RUN))
                .isEqualTo(first)
                .doesNotContain("2020-02-02")
                .contains("processors", "4,096 MiB");
    }

    @Test
    void write_virtualRun_leavesTheMachineOut() throws IOException {
        assertThat(page(TinyRun.RUN.replace("\"live\"", "\"virtual\"")))
                .contains("Play on the virtual stage", "does not depend on its machine")
                .doesNotContain("processors");
    }

    @Test
    void write_markupInTheDrill_staysText() throws IOException {
        String page = page(TinyRun.RUN.replace("\"Tiny\"", "\"<i>Tiny</i> {{data}}\""));

        assertThat(page)
                .doesNotContain("<script>alert", "<i>Tiny")
                .contains("<h1>&lt;i&gt;Tiny&lt;/i&gt; {{data}}</h1>");
    }

    @Test
    void write_expectationNotMet_saysWhyInWords() throws IOException {
        assertThat(page(TinyRun.RUN)).contains("not met: above the bound");
        assertThat(page(TinyRun.RUN.replace("\"value\": 0.05, \"least\": null", "\"value\": 0.005, \"least\": 0.007")))
                .contains("not met: below the bound");
        assertThat(page(TinyRun.RUN.replaceFirst(
                        "\"met\": false, \"why\": null", "\"met\": false, \"why\": \"never detected\"")))
                .contains("not met: never detected");
    }

    @Test
    void write_unfitRun_saysThatNothingIsAVerdict() throws IOException {
        String run = TinyRun.RUN.replace("\"fit\": true", "\"fit\": false").replace("\"ok\": true", "\"ok\": false");

        assertThat(page(run))
                .contains("Only 0 of 1 self-checks hold. Nothing below is a verdict.")
                .contains("does not hold");
    }

    @Test
    void write_withoutVerdict_saysWhy() throws IOException {
        String open = TinyRun.RUN.replace(VERDICT, "null");

        assertThat(page(open.replace("\"complete\"", "\"interrupted\"").replace("\"lasts\": 1.0", "\"lasts\": 60.0")))
                .contains("No verdict:</strong> the play was interrupted at 1\u00a0s of 60\u00a0s.");
        assertThat(page(open.replace("\"complete\"", "\"playing\"")))
                .contains("the play had reached 1\u00a0s of 1\u00a0s when it was last heard of.");
    }

    @Test
    void write_interruptedRun_saysItOnceAndJudgesNothing() throws IOException {
        String run = TinyRun.RUN
                .replace("\"complete\"", "\"interrupted\"")
                .replace("\"fit\": true", "\"fit\": false")
                .replaceFirst("\"text\": \"(Not m|M)et", "\"text\": \"Interrupted at 12.3 s: not judged; $1et")
                .replaceFirst("\"met\": (true|false), \"why\"", "\"met\": null, \"why\"");

        assertThat(page(run))
                .contains("Interrupted at 12.3 s:</strong> not judged;")
                .contains(">not reached")
                .doesNotContain("was interrupted at", "Only ", "Nothing below");
    }

    @Test
    void write_runThatRecordedNoSlice_stillMakesAPage() throws IOException {
        TinyRun.write(folder);
        Path slices = folder.resolve("slices.csv");
        Files.writeString(slices, Files.readAllLines(slices).get(0) + "\n");

        assertThat(Files.readString(Report.write(folder))).contains("No slice was recorded.");
    }

    @Test
    void write_folderThatCannotBeRead_saysWhatIsWrong() throws IOException {
        assertThatThrownBy(() -> Report.write(folder))
                .isInstanceOf(IOException.class)
                .hasMessageContaining("there is no run.json in it");
        assertThatThrownBy(() -> page("{")).isInstanceOf(IOException.class).hasMessageContaining("run.json");
        assertThatThrownBy(() -> page("{\"format\": 2}")).hasMessageContaining("is of format 2");
        TinyRun.write(folder);
        Path slices = folder.resolve("slices.csv");
        Files.writeString(slices, Files.readString(slices).replace("p99_ms", "p98_ms"));
        assertThatThrownBy(() -> Report.write(folder))
                .isInstanceOf(IOException.class)
                .hasMessageEndingWith("no column of numbers p99_ms");
    }

    @Test
    void figures_withMarkup_areSafeInsideAScript() throws IOException {
        TinyRun.write(folder);
        Path cues = folder.resolve("cues.csv");
        Files.writeString(cues, Files.readString(cues).replace("dies", "</script>"));

        String figures = ChartData.json(RunFiles.read(folder));

        assertThat(figures).doesNotContain("<");
        assertThat(new ObjectMapper().readTree(figures).at("/cues/0/cue").asText())
                .endsWith("first, </script>");
    }

    @Test
    void figures_ofColumns_useRunsWhereTheyAreShorter() throws IOException {
        JsonNode figures = new ObjectMapper().readTree(ChartData.json(RunFiles.read(TinyRun.write(folder))));

        assertThat(figures.at("/requests/offered").toString()).isEqualTo("{\"runs\":[10,4,20,6]}");
        assertThat(figures.at("/requests/failed").toString()).isEqualTo("{\"refused\":{\"runs\":[0,4,10,6]}}");
        assertThat(figures.at("/backends/0/standing").toString()).isEqualTo("[[0,\"up\"],[0.65,\"down\"]]");
        assertThat(figures.at("/backends/1/standing").toString()).isEqualTo("[[0,\"up\"]]");
        assertThat(figures.at("/played").asDouble()).isEqualTo(1.0);
    }
}
