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

/** Tune and compare as commands: what they end with, what they say, and what they leave behind. */
class TuneTest {
    @TempDir
    private Path folder;

    private Path drill(String lasts, String bound) throws IOException {
        return Files.writeString(folder.resolve("play.yaml"), """
                drill: A short play
                about: Three backends, one hangs.
                stage:
                  pools:
                    seats:
                      method: round-robin
                      probe: {path: /afloat, every: 200ms, within: 100ms, misses: 2, passes: 1}
                      serves: {workers: 8, time: {fixed: 1ms}}
                      backends: {fulmar: , gannet: , petrel: }
                traffic:
                  - {to: seats, rate: 100/s, give-up: 300ms, requests: [{get: /sailings}]}
                lasts: %s
                cues:
                  - {at: 500ms, hang: fulmar, as: fulmar hangs}
                expect:
                  - {measure: failed, at-most: %s}
                """.formatted(lasts, bound));
    }

    private Command tune(Path drill, String... more) throws IOException {
        List<String> first = List.of("tune", drill.toString(), "--want", "failed", "--against", "standing-changes");
        return Command.start(
                folder, Stream.concat(first.stream(), Stream.of(more)).toArray(String[]::new));
    }

    @Test
    void tune_withConfirm_rehearsesTheBestAndPutsItBesideTheForecast() throws Exception {
        Command command = tune(
                drill("2s", "90%"), "--vary", "probe.misses=1,5", "--plays", "20", "--confirm", "1", "--out", "grid");
        assertThat(command.status()).as(command.out() + command.err()).isZero();
        assertThat(command.out())
                .contains(
                        "Take probe.misses 1.",
                        "non-dominated, taken",
                        "Rehearsing cell 1: probe.misses 1",
                        "Forecast beside rehearsal:",
                        "grid/tune.html");
        assertThat(command.err())
                .contains("2 cells of 20 plays in virtual time", "40 of 40 plays")
                .doesNotContain("steelyard:");
        JsonNode json =
                new ObjectMapper().readTree(folder.resolve("grid/grid.json").toFile());
        assertThat(json.path("rehearsed")).hasSize(1);
        assertThat(json.path("rehearsed").path(0).path("want").path("value").isNumber())
                .isTrue();
        Path run = folder.resolve("grid/rehearsal-of-cell-1/run.json");
        assertThat(new ObjectMapper().readTree(run.toFile()).path("source").asText())
                .contains("misses: 1");
        assertThat(Files.readString(folder.resolve("grid/tune.html")))
                .contains("Forecast beside rehearsal", "<svg class=\"tune on-wide\"")
                .doesNotContain("{{", "<script", "http://", "https://");
    }

    @Test
    void tune_whereNoCellHolds_endsWith1() throws Exception {
        Command command = tune(drill("1s", "0%"), "--vary", "probe.misses=2,3", "--plays", "3", "--out", "grid");
        assertThat(command.status()).as(command.out() + command.err()).isEqualTo(1);
        assertThat(command.out()).contains("In no cell do all expectations hold together");
    }

    @Test
    void tune_interrupted_keepsTheCellsThatWereComplete() throws Exception {
        Command command = tune(
                drill("60s", "90%"),
                "--vary",
                "probe.every=200ms,300ms,400ms,500ms,600ms,700ms,800ms,900ms,1s,2s",
                "--plays",
                "400",
                "--out",
                "grid");
        await().atMost(Duration.ofSeconds(100)).until(() -> command.err().contains("400 of 4,000 plays"));
        command.signal("INT");
        assertThat(command.status()).as(command.out() + command.err()).isEqualTo(130);
        assertThat(command.out()).containsPattern("Interrupted; this is of the first [1-9] of 10 cells");
        assertThat(Files.readAllLines(folder.resolve("grid/grid.csv"))).hasSizeBetween(2, 10);
        assertThat(Files.readString(folder.resolve("grid/grid.json"))).contains("\"ended\": \"interrupted\"");
    }

    @Test
    void compare_ofTwoForecasts_endsWith1WhenTheSecondIsWorse() throws Exception {
        Path drill = drill("2s", "90%");
        for (int misses = 2; misses <= 4; misses += 2) {
            Path changed = Files.writeString(
                    folder.resolve("misses" + misses + ".yaml"),
                    Files.readString(drill).replace("misses: 2", "misses: " + misses));
            Command forecast =
                    Command.start(folder, "forecast", changed.toString(), "--plays", "20", "--out", "run" + misses);
            assertThat(forecast.status()).as(forecast.err()).isZero();
        }
        Command worse = Command.start(folder, "compare", "run2", "run4", "--json", "compared.json");
        assertThat(worse.status()).as(worse.out() + worse.err()).isEqualTo(1);
        assertThat(worse.out()).contains("Worse: of ", "stage.pools.seats.probe.misses", "failed, whole play");
        assertThat(Files.readString(folder.resolve("compared.json"))).contains("\"worse\": true");
        Command better = Command.start(folder, "compare", "run4", "run2");
        assertThat(better.status()).as(better.out()).isZero();
        Command none = Command.start(folder, "compare", "run2", "nothing");
        assertThat(none.status()).isEqualTo(2);
        assertThat(none.err())
                .isEqualToIgnoringNewLines(
                        "steelyard: nothing is not a folder; name a run folder, such as `steelyard rehearse` leaves");
    }
}
