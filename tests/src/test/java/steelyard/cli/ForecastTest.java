package steelyard.cli;

import static org.assertj.core.api.Assertions.assertThat;
import static org.awaitility.Awaitility.await;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** The forecast command: what it ends with, what it says, and what it leaves behind. */
class ForecastTest {
    private static final List<String> RUN_FILES = List.of(
            "cues.csv",
            "junit.xml",
            "latency.hlog",
            "machine.json",
            "plays.csv",
            "report.html",
            "run.json",
            "slices.csv",
            "standing.csv",
            "verdict.json");

    @TempDir
    private Path folder;

    /** Two backends of which one dies; detected after 500 ms to 1 s, each instant between as likely as any other. */
    private Path drill(String serves, String expectation) throws IOException {
        return Files.writeString(folder.resolve("play.yaml"), """
                drill: A short play
                about: Two backends, one dies.
                stage:
                  pools:
                    seats:
                      method: round-robin
                      probe: {path: /afloat, every: 500ms, within: 400ms, misses: 2, passes: 1}
                      retry: {at-most: 1, budget: 100%%}
                      serves: {workers: 8, %s}
                      backends: {fulmar: {weight: 1}, gannet: {weight: 1}}
                traffic:
                  - {to: seats, rate: 50/s, requests: [{get: /sailings, share: 100%%}]}
                lasts: 2s
                cues:
                  - {at: 500ms, kill: fulmar, as: fulmar dies}
                expect:
                  - {measure: %s}
                """.formatted(serves, expectation));
    }

    private Path drill(String expectation) throws IOException {
        return drill("time: {fixed: 1ms}", expectation);
    }

    private Command forecast(Path drill, String... more) throws IOException {
        String[] line = Stream.concat(Stream.of("forecast", drill.toString(), "--out", "run"), Stream.of(more))
                .toArray(String[]::new);
        return Command.start(folder, line);
    }

    private JsonNode json(String file) throws IOException {
        return new ObjectMapper().readTree(folder.resolve("run").resolve(file).toFile());
    }

    private List<String> filesOfRun() throws IOException {
        try (Stream<Path> files = Files.list(folder.resolve("run"))) {
            return files.map(file -> file.getFileName().toString()).sorted().toList();
        }
    }

    @Test
    void forecast_thatIsMet_endsWith0AndLeavesTheWholeRun() throws Exception {
        Command command =
                forecast(drill("detected-in, of: fulmar, after: fulmar dies, at-most: 1100ms"), "--plays", "30");
        assertThat(command.status()).as(command.out() + command.err()).isZero();
        assertThat(command.out())
                .contains(
                        "Met: the one expectation held in at least 90 % of 30 plays",
                        "at most 1.1 s", "100 %", "latency 99 %, whole play", "run/report.html")
                .containsPattern("run +run\\R");
        assertThat(command.err().lines())
                .hasSize(11)
                .startsWith("A short play, 30 plays of 2 s in virtual time", "3 of 30 plays")
                .endsWith("30 of 30 plays");
        assertThat(filesOfRun()).isEqualTo(RUN_FILES);
        assertThat(json("verdict.json").path("met").asBoolean()).isTrue();
        assertThat(json("run.json").path("ended").asText()).isEqualTo("complete");
        assertThat(json("run.json").path("stage").asText()).isEqualTo("virtual");
    }

    /** About half of the plays detect within 750 ms. */
    @Test
    void forecast_judgedByItsHold_isMetOrNotMet() throws Exception {
        Path drill = drill("detected-in, of: fulmar, after: fulmar dies, at-most: 750ms");
        Command command = forecast(drill, "--plays", "60");
        assertThat(command.status()).isEqualTo(1);
        assertThat(command.out()).contains("Not met: 1 of 1 expectation held in less than 90 % of 60 plays", "not met");
        assertThat(json("verdict.json").path("met").asBoolean()).isFalse();
        assertThat(Files.readString(folder.resolve("run/junit.xml"))).contains("failures=\"1\"", "wanted 90 %");
        Command lower =
                Command.start(folder, "forecast", drill.toString(), "--plays", "60", "--hold", "10%", "--out", "lower");
        assertThat(lower.status()).isZero();
    }

    @Test
    void forecast_withAPlayThatIsUnfit_endsWith3AndSaysWhy() throws Exception {
        Path drill = drill("failed, at-most: 100%");
        Files.writeString(drill, Files.readString(drill).replace("stage:\n", "stage:\n  connections: 1\n"));
        Command command = forecast(drill, "--plays", "5");
        assertThat(command.status()).as(command.out() + command.err()).isEqualTo(3);
        assertThat(command.out()).contains("Unfit to judge", "connection cap");
        assertThat(json("verdict.json").path("fit").asBoolean()).isFalse();
    }

    @Test
    void drill_thatAnswersFromMappingFiles_isRefusedInOneLineAndLeavesNothing() throws Exception {
        Files.createDirectory(folder.resolve("answers"));
        Files.writeString(
                folder.resolve("answers/one.json"),
                "{\"request\": {\"method\": \"GET\", \"url\": \"/sailings\"}, \"response\": {\"status\": 200}}");
        Command command = forecast(drill("time: {fixed: 1ms}, answers: answers", "failed, at-most: 100%"));
        assertThat(command.status()).isEqualTo(3);
        assertThat(command.err().strip())
                .startsWith("steelyard: backend fulmar answers from mapping files")
                .doesNotContain("\n", "\tat ");
        assertThat(folder.resolve("run")).doesNotExist();
    }

    @Test
    void outFolder_thatHoldsSomething_isRefusedAndLeftAlone() throws Exception {
        Files.createDirectory(folder.resolve("run"));
        Files.writeString(folder.resolve("run/diary.txt"), "mine");
        Command command = forecast(drill("failed, at-most: 100%"));
        assertThat(command.status()).isEqualTo(3);
        assertThat(command.err().strip())
                .isEqualTo("steelyard: run is already there and not empty; name another folder or remove it");
        assertThat(filesOfRun()).containsExactly("diary.txt");
    }

    @Test
    void drill_thatIsBroken_showsItsProblemsAndEndsWith2() throws Exception {
        Command command = forecast(drill("failed, at-most: 100"));
        assertThat(command.status()).isEqualTo(2);
        assertThat(command.err().lines()).allMatch(line -> line.matches(".*play\\.yaml:\\d+:\\d+: .+; .+"));
        assertThat(folder.resolve("run")).doesNotExist();
    }

    @Test
    void forecast_interrupted_keepsThePlaysThatEndedAndEndsWith130() throws Exception {
        Command command = forecast(drill("failed, at-most: 100%"), "--plays", "100000");
        await().atMost(Duration.ofSeconds(60)).until(() -> rowsOfPlays() > 3);
        command.signal("INT");
        assertThat(command.status()).as(command.out() + command.err()).isEqualTo(130);
        assertThat(command.err()).doesNotContain("steelyard:");
        assertThat(filesOfRun()).isEqualTo(RUN_FILES);
        int plays = json("run.json").path("forecast").path("plays").asInt();
        assertThat(plays).isBetween(3, 99_999).isEqualTo(rowsOfPlays() - 1);
        assertThat(json("run.json").path("ended").asText()).isEqualTo("interrupted");
        assertThat(command.out()).contains("Interrupted; judged on the first ", " of 100000.");
    }

    @Test
    void forecast_interruptedBeforeAPlayHasEnded_saysSoAndEndsWith130() throws Exception {
        Path drill = drill("failed, at-most: 100%");
        Files.writeString(
                drill,
                Files.readString(drill).replace("rate: 50/s", "rate: 20000/s").replace("lasts: 2s", "lasts: 1h"));
        Command command = forecast(drill, "--plays", "3");
        await().atMost(Duration.ofSeconds(60)).until(() -> command.err().contains("in virtual time"));
        command.signal("INT");
        assertThat(command.status()).as(command.out() + command.err()).isEqualTo(130);
        assertThat(command.out()).contains("Interrupted before a play had ended; nothing is foreseen.");
        assertThat(json("run.json").path("ended").asText()).isEqualTo("interrupted");
        assertThat(json("run.json").path("verdict").isNull()).isTrue();
        assertThat(folder.resolve("run/verdict.json")).doesNotExist();
        assertThat(Files.readString(folder.resolve("run/report.html"))).contains("interrupted before a play had ended");
    }

    private int rowsOfPlays() throws IOException {
        Path rows = folder.resolve("run/plays.csv");
        return Files.exists(rows) ? (int) Files.readString(rows).lines().count() : 0;
    }
}
