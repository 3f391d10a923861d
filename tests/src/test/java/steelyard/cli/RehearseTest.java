package steelyard.cli;

import static org.assertj.core.api.Assertions.assertThat;
import static org.awaitility.Awaitility.await;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.net.InetAddress;
import java.net.ServerSocket;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** The whole command: what it ends with, what it says, and what it leaves behind. Bounds are wide for slow machines. */
class RehearseTest {
    private static final List<String> RUN_FILES = List.of(
            "cues.csv",
            "junit.xml",
            "latency.hlog",
            "machine.json",
            "report.html",
            "run.json",
            "slices.csv",
            "standing.csv",
            "verdict.json");

    @TempDir
    private Path folder;

    private Path drill(String lasts, String front, String rate, String expectation) throws IOException {
        String text = """
                drill: A short play
                about: Two backends, one dies.
                stage:
                  pools:
                    seats:
                      method: round-robin
                      probe: {path: /afloat, every: 500ms, within: 400ms, misses: 2, passes: 1}
                      retry: {at-most: 1, budget: 100%%}%s
                      serves: {workers: 8, queue: 64, time: {fixed: 1ms}}
                      backends:
                        fulmar: {weight: 1}
                        gannet: {weight: 1}
                traffic:
                  - {to: seats, arrivals: even, rate: %s, give-up: 10s, requests: [{get: /sailings, share: 100%%}]}
                lasts: %s
                cues:
                  - {at: 500ms, kill: fulmar, as: fulmar dies}
                expect:
                  - {measure: %s}
                """.formatted(front, rate, lasts, expectation);
        return Files.writeString(folder.resolve("play.yaml"), text);
    }

    private Path drill(String lasts, String expectation) throws IOException {
        return drill(lasts, "", "20/s", expectation);
    }

    private Command rehearse(Path drill, String... more) throws IOException {
        String[] line = Stream.concat(Stream.of("rehearse", drill.toString()), Stream.of(more))
                .toArray(String[]::new);
        return Command.start(folder, line);
    }

    private JsonNode json(String run, String file) throws IOException {
        return new ObjectMapper().readTree(folder.resolve(run).resolve(file).toFile());
    }

    private List<String> filesOf(Path run) throws IOException {
        try (Stream<Path> files = Files.list(run)) {
            return files.map(file -> file.getFileName().toString()).sorted().toList();
        }
    }

    /** A play on a machine that is too busy is unfit, which is another exit status and says why; nothing else is. */
    private void assertEndsWith(int status, Command command) throws IOException, InterruptedException {
        int ended = command.status();
        if (ended == 3) {
            assertThat(command.out()).contains("Unfit to judge", "lateness of the generator");
        } else {
            assertThat(ended).as(command.out() + command.err()).isEqualTo(status);
        }
        assertThat(command.err()).doesNotContain("\tat ", "Exception");
    }

    @Test
    void play_thatIsMet_endsWith0AndLeavesTheWholeRun() throws Exception {
        Command command =
                rehearse(drill("2s", "detected-in, of: fulmar, after: fulmar dies, at-most: 60s"), "--out", "run");
        assertEndsWith(0, command);
        assertThat(command.out())
                .contains(
                        "cue: kill fulmar (fulmar dies)",
                        "fulmar: up to down (misses)",
                        "at most 60 s",
                        "run/report.html")
                .containsPattern("run +run\\R");
        assertThat(command.err()).isEmpty();
        assertThat(filesOf(folder.resolve("run"))).isEqualTo(RUN_FILES);
        assertThat(json("run", "run.json").path("ended").asText()).isEqualTo("complete");
        assertThat(json("run", "verdict.json").path("met").asBoolean()).isTrue();
    }

    @Test
    void play_thatIsNotMet_endsWith1AndSaysByHowMuch() throws Exception {
        Command command = rehearse(drill("1s", "latency, quantile: 50%, at-most: 1ms"), "--out", "run");
        assertEndsWith(1, command);
        assertThat(command.out()).contains("at most 1 ms", "not met");
        assertThat(json("run", "verdict.json").path("met").asBoolean()).isFalse();
    }

    @Test
    void play_thatIsUnfit_endsWith3AndSaysWhy() throws Exception {
        Path drill = drill("1s", "failed, at-most: 100%");
        String text = Files.readString(drill);
        Files.writeString(
                drill, text.replace("stage:", "stage:\n  connections: 1").replace("{fixed: 1ms}", "{fixed: 300ms}"));
        Command command = rehearse(drill, "--out", "run");
        assertThat(command.status()).isEqualTo(3);
        assertThat(command.out()).contains("Unfit to judge: connection cap", "Raise connections");
        assertThat(command.err()).isEmpty();
        assertThat(json("run", "verdict.json").path("fit").asBoolean(true)).isFalse();
    }

    @Test
    void play_withoutOut_makesAFolderNamedAfterTheDrill() throws Exception {
        Command command = rehearse(drill("1s", "failed, at-most: 100%"));
        assertEndsWith(0, command);
        try (Stream<Path> runs = Files.list(folder.resolve("runs"))) {
            assertThat(runs)
                    .hasSize(1)
                    .allMatch(run -> run.getFileName().toString().matches("play-\\d{8}-\\d{6}"));
        }
    }

    @Test
    void play_interrupted_writesTheRunAndEndsWith130() throws Exception {
        assertThat(ended("INT")).isEqualTo(130);
    }

    @Test
    void play_terminated_writesTheRunAndEndsWith143() throws Exception {
        assertThat(ended("TERM")).isEqualTo(143);
    }

    private int ended(String signal) throws Exception {
        Command command = rehearse(drill("5m", "failed, at-most: 100%"), "--out", "run");
        await().atMost(Duration.ofSeconds(60)).until(() -> command.out().contains("cue: kill fulmar"));
        command.signal(signal);
        int status = command.status();
        assertThat(command.out())
                .containsPattern("Interrupted at [0-9.]+ m?s: not judged; what was measured up to then stands below\\.")
                .doesNotContain("played to its end", " not met");
        assertThat(command.err()).isEmpty();
        assertThat(filesOf(folder.resolve("run"))).isEqualTo(RUN_FILES);
        assertThat(json("run", "run.json").path("ended").asText()).isEqualTo("interrupted");
        assertThat(Files.readString(folder.resolve("run/cues.csv"))).contains("fulmar dies");
        return status;
    }

    /** Two different signals: a system may make one of two alike. Requests take long, so that it would not end by itself. */
    @Test
    void play_interruptedAndThenTerminated_endsAtOnce() throws Exception {
        Path drill = drill("5m", "failed, at-most: 100%");
        Files.writeString(drill, Files.readString(drill).replace("{fixed: 1ms}", "{fixed: 5s}"));
        Command command = rehearse(drill, "--out", "run");
        await().atMost(Duration.ofSeconds(60)).until(() -> command.out().contains("cue: kill fulmar"));
        command.signal("INT");
        command.signal("TERM");
        assertThat(command.status()).isEqualTo(143);
        assertThat(command.err()).isEqualToIgnoringNewLines("steelyard: stopped; what was written stands in run");
        assertThat(command.running()).isFalse();
    }

    @Test
    void outFolder_thatHoldsSomething_isRefusedAndLeftAlone() throws Exception {
        Files.createDirectory(folder.resolve("run"));
        Files.writeString(folder.resolve("run/diary.txt"), "mine");
        refused(
                "run is already there and not empty; name another folder or remove it",
                drill("1s", "failed, at-most: 100%"));
        assertThat(filesOf(folder.resolve("run"))).containsExactly("diary.txt");
    }

    @Test
    void outFolder_belowAFile_isRefused() throws Exception {
        Files.writeString(folder.resolve("run"), "a file");
        refused("run is a file; name a folder that does not exist yet", drill("1s", "failed, at-most: 100%"));
        Command command = rehearse(folder.resolve("play.yaml"), "--out", "run/below");
        assertThat(command.status()).isEqualTo(3);
        assertThat(command.err()).matches("steelyard: run/below cannot be made, since run is a file; .*\\R");
    }

    @Test
    void frontPort_thatIsTaken_isRefusedAndLeavesNothing() throws Exception {
        try (ServerSocket taken = new ServerSocket(0, 1, InetAddress.getLoopbackAddress())) {
            String front = "\n      front: {port: " + taken.getLocalPort() + "}";
            Command command = rehearse(drill("1s", front, "20/s", "failed, at-most: 100%"), "--out", "run");
            assertThat(command.status()).isEqualTo(3);
            assertThat(command.err())
                    .matches(
                            ".*play\\.yaml:9:7: port " + taken.getLocalPort() + " is taken; choose another one, .*\\R");
        }
        assertThat(folder.resolve("run")).doesNotExist();
    }

    @Test
    void rate_beyondTheGenerator_isRefused() throws Exception {
        refused("requests a second", drill("1s", "", "900000/s", "failed, at-most: 100%"));
    }

    private void refused(String message, Path drill) throws IOException, InterruptedException {
        Command command = rehearse(drill, "--out", "run");
        assertThat(command.status()).isEqualTo(3);
        assertThat(command.err().strip())
                .startsWith("steelyard: ")
                .contains(message)
                .doesNotContain("\n", "\tat ");
        assertThat(command.out()).isEmpty();
    }

    @Test
    void drill_thatIsBroken_showsEveryProblemAndPlaysNothing() throws Exception {
        Path drill = drill("1", "failed, at-most: 100");
        Command command = rehearse(drill, "--out", "run");
        assertThat(command.status()).isEqualTo(2);
        assertThat(command.err().lines())
                .hasSizeGreaterThanOrEqualTo(2)
                .allMatch(line -> line.matches(".*play\\.yaml:\\d+:\\d+: .+; .+"));
        assertThat(command.out()).isEmpty();
        assertThat(folder.resolve("run")).doesNotExist();
    }
}
