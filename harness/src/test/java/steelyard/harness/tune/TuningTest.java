package steelyard.harness.tune;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.harness.record.FolderRefused;
import steelyard.harness.record.RunFolder;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.tune.Tuning.Request;
import steelyard.harness.tune.Tuning.Tuned;

class TuningTest {
    private static final String DRILL = """
            drill: One of four hangs
            about: Watch how long.
            stage:
              pools:
                seats:
                  method: round-robin
                  probe: {path: /afloat, every: 500ms, within: 250ms, misses: 2, passes: 2}
                  serves: {workers: 4, queue: 16, probe-loss: 2%, time: 10ms}
                  backends: {fulmar: , gannet: , petrel: , skua: }
            traffic:
              - {to: seats, arrivals: even, rate: 40/s, give-up: 500ms, requests: [{get: /}]}
            lasts: 20s
            cues:
              - {at: 5s, hang: fulmar, as: fulmar hangs}
            expect:
              - {measure: failed, at-most: 4%}
              - {measure: standing-changes, at-most: 3}
            """;

    @TempDir
    private Path temp;

    private static Request request(String want, String against, String... variations) throws TuneRefused {
        List<Variation> read = new ArrayList<>();
        for (String each : variations) {
            read.add(Variation.read(each));
        }
        return new Request(Grid.of("d", DRILL, read), new Aim(want), new Aim(against), 1, 4, 0.9);
    }

    private static Tuned play(Request request, int threads) throws TuneRefused, CannotPlay {
        try (Tuning tuning = new Tuning(request, threads)) {
            return tuning.play(done -> {});
        }
    }

    @Test
    void play_ofAGrid_findsThatMoreMissesFailMoreAndAlarmLess() throws TuneRefused, CannotPlay {
        Tuned tuned = play(request("failed", "standing-changes", "probe.misses=1,2,8"), 2);
        assertThat(tuned.complete()).isTrue();
        List<Result> results = tuned.results();
        assertThat(results.get(0).want().mean())
                .isLessThan(results.get(1).want().mean());
        assertThat(results.get(1).want().mean())
                .isLessThan(results.get(2).want().mean());
        assertThat(results.get(0).against().mean())
                .isGreaterThan(results.get(1).against().mean());
        assertThat(results.get(2).holds(0.9)).isFalse();
        assertThat(tuned.choice().taken()).contains(results.get(1));
    }

    @Test
    void write_ofOneGrid_givesTheSameBytesOnAnyThreads() throws Exception {
        Request request = request("failed", "standing-changes", "probe.misses=2,3");
        String[] texts = new String[2];
        for (int threads = 1; threads <= 2; threads++) {
            RunFolder folder = RunFolder.create(temp.resolve("grid" + threads));
            GridFiles.write(folder, play(request, threads), List.of(), "One of two hangs", DRILL, "0.1.0");
            texts[threads - 1] = Files.readString(folder.file("grid.csv")) + Files.readString(folder.file("grid.json"));
        }
        assertThat(texts[0]).isEqualTo(texts[1]);
    }

    @Test
    void write_ofAGrid_tellsEveryCellAndTheChoice() throws TuneRefused, CannotPlay, FolderRefused, IOException {
        Tuned tuned = play(request("failed", "detected-in", "probe.misses=2,99"), 1, true);
        RunFolder folder = RunFolder.create(temp.resolve("grid"));
        Confirmed confirmed = new Confirmed(tuned.results().get(0), 1, "rehearsal-of-cell-1", true, 1, Double.NaN);
        GridFiles.write(folder, tuned, List.of(confirmed), "t", DRILL, "0.1.0");
        List<String> rows = Files.readAllLines(folder.file("grid.csv"));
        assertThat(rows.get(0))
                .isEqualTo("cell,probe.misses,want:mean,want:median,want:low90,want:high90,want:undefined,against:mean,"
                        + "against:median,against:low90,against:high90,against:undefined,plays,held,fit,mark,taken");
        assertThat(rows).hasSize(3);
        // 99 misses take 49 s of 20: detected-in has no value in any of the 4 plays.
        assertThat(rows.get(2)).startsWith("2,99,0.").contains(",0,,,,,4,4,0,true,,false");
        JsonNode json = new ObjectMapper().readTree(folder.file("grid.json").toFile());
        assertThat(json.path("cells")).hasSize(2);
        assertThat(json.path("taken").path("values").path("probe.misses").asText())
                .isEqualTo("2");
        assertThat(json.path("want").path("better").asText()).isEqualTo("less");
        assertThat(json.path("rehearsed").path(0).path("want").path("inside").asBoolean())
                .isFalse();
        assertThat(json.path("rehearsed").path(0).path("against").path("value").isNull())
                .isTrue();
    }

    private Tuned play(Request request, int threads, boolean timed) throws TuneRefused, CannotPlay {
        String text = DRILL + "  - {measure: detected-in, of: fulmar, after: fulmar hangs, at-most: 3s}\n";
        Grid grid = timed ? Grid.of("d", text, request.grid().variations()) : request.grid();
        return play(new Request(grid, request.want(), request.against(), 1, 4, 0.9), threads);
    }

    @Test
    void play_cancelledInItsSecondCell_keepsTheFirst() throws TuneRefused, CannotPlay {
        Request request = request("failed", "standing-changes", "probe.misses=2,3,4");
        try (Tuning tuning = new Tuning(request, 1)) {
            Tuned tuned = tuning.play(done -> {
                if (done == 5) {
                    tuning.cancel();
                }
            });
            assertThat(tuned.complete()).isFalse();
            assertThat(tuned.results()).hasSize(1);
            assertThat(tuned.choice().ranked()).hasSize(1);
        }
    }

    @Test
    void tuning_withAMeasureThatIsNone_isRefusedBeforeAnyPlay() throws TuneRefused {
        Request request = request("failed", "detected-in", "probe.misses=2");
        assertThatThrownBy(() -> new Tuning(request, 1))
                .isInstanceOf(TuneRefused.class)
                .hasMessageStartingWith("--against 'detected-in' is no measure of this drill; ");
    }
}
