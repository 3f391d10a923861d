package steelyard.forecast;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Drill;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.forecast.PlayTable;
import steelyard.harness.forecast.Played;
import steelyard.harness.forecast.Series;
import steelyard.harness.forecast.Spread;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Finding;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunData.FindingRow;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.Slices;
import steelyard.harness.record.Verdict;
import steelyard.harness.stage.virtual.Transport;
import steelyard.harness.stage.virtual.VirtualStage;

class ForecastFilesTest {
    private static final int PLAYS = 13;
    private static final List<String> FILES = List.of(
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

    private Map<String, String> files(long seed, int threads, String name) throws Exception {
        Small.record(Series.of(Small.drill(), seed, PLAYS), threads, folder.resolve(name));
        return Small.files(folder.resolve(name));
    }

    @Test
    void files_onAnyNumberOfThreads_areTheSameButForTheMachine() throws Exception {
        Map<String, String> one = files(5, 1, "one");
        assertThat(one.keySet()).containsExactlyElementsOf(FILES);
        for (int threads : new int[] {2, 4}) {
            Map<String, String> other = files(5, threads, "on" + threads);
            assertThat(other.keySet()).isEqualTo(one.keySet());
            assertThat(other.get("machine.json")).isNotEqualTo(one.get("machine.json"));
            for (String name : FILES) {
                if (!name.equals("machine.json")) {
                    assertThat(other.get(name).equals(one.get(name)))
                            .as("%s on %d threads", name, threads)
                            .isTrue();
                }
            }
        }
    }

    @Test
    void files_ofAnotherSeed_differ() throws Exception {
        Map<String, String> one = files(5, 2, "one");
        Map<String, String> other = files(6, 2, "other");
        for (String name : List.of("plays.csv", "slices.csv", "latency.hlog", "run.json", "report.html")) {
            assertThat(other.get(name).equals(one.get(name))).as(name).isFalse();
        }
    }

    @Test
    void plays_areThoseThatTheirSeedsGiveAlone() throws Exception {
        Drill drill = Small.drill();
        Played played = Small.record(Series.of(drill, 40, 4), 2, folder.resolve("run"));
        PlayTable table = PlayTable.read(RunFolder.existing(folder.resolve("run")));
        assertThat(table.rows()).hasSize(4);
        for (int play = 0; play < 4; play++) {
            Judge judge = new Judge(drill, new Cast(drill));
            try (VirtualStage stage = new VirtualStage(drill, 40 + play, Transport.USUAL)) {
                stage.open(judge);
                stage.play(new Conductor(drill, new Chance(40 + play), new java.util.ArrayDeque<>()));
            }
            Verdict verdict = judge.verdict();
            assertThat(played.plays().get(play).seed()).isEqualTo(40 + play);
            assertThat(table.rows().get(play).seed()).isEqualTo(40 + play);
            for (int figure = 0; figure < verdict.expectations().size(); figure++) {
                Finding finding = verdict.expectations().get(figure);
                assertThat(played.plays().get(play).value(figure)).isEqualTo(finding.value());
                double shown = finding.text().startsWith("failed") ? finding.value() : finding.value() / 1e9;
                assertThat(table.rows().get(play).values()[figure]).isCloseTo(shown, within(1e-10));
            }
        }
    }

    @Test
    void run_readBack_holdsSpreadsSharesAndWhatItIsOf() throws Exception {
        Played played = Small.record(Series.of(Small.drill(), 5, PLAYS), 2, folder.resolve("run"));
        RunData run = RunData.read(RunFolder.existing(folder.resolve("run")));
        assertThat(run.forecast()).isNotNull();
        assertThat(run.forecast().plays()).isEqualTo(PLAYS);
        assertThat(run.forecast().bandPlays()).isEqualTo(PLAYS);
        assertThat(run.forecast().rows()).extracting(RunData.GroupRow::name).containsExactly("fulmar", "gannet");
        Spread spread = played.spread(0);
        FindingRow failed = run.expectations().get(0);
        assertThat(failed.value()).isCloseTo(spread.median(), within(1e-9));
        assertThat(failed.spread().low90()).isCloseTo(spread.low90(), within(1e-9));
        assertThat(failed.spread().high95()).isCloseTo(spread.high95(), within(1e-9));
        for (int figure = 0; figure < played.expectations(); figure++) {
            assertThat(run.expectations().get(figure).held().plays())
                    .isEqualTo(played.held(figure).held());
        }
        assertThat(played.held(2).held())
                .as("a bound that cuts the plays in two")
                .isBetween(1, PLAYS - 1);
        assertThat(run.verdict().met()).isEqualTo(run.expectations().stream().allMatch(FindingRow::met));
    }

    @Test
    void slices_ofPlaysThatAreAlike_haveBandsWithoutWidth() throws Exception {
        String even = Small.TEXT
                .replace("rate: 250/s", "rate: 100/s, arrivals: even")
                .replace("{exponential: 8ms}", "{fixed: 8ms}")
                .replaceAll(" +- \\{at: .*\n", "")
                .replace("cues:\n", "")
                .replaceAll(" +- \\{measure: detected.*\n", "");
        Small.record(Series.of(Small.read(even), 5, 4), 2, folder.resolve("run"));
        Slices slices = RunData.read(RunFolder.existing(folder.resolve("run"))).slices();
        assertThat(slices.rows()).isEqualTo(80);
        for (String column : List.of("offered", "offered:low", "offered:high", "offered:mean")) {
            assertThat(slices.numbers(column)).as(column).containsOnly(10);
        }
        assertThat(slices.numbers("fulmar", "share")).containsOnly(0.5);
        assertThat(slices.numbers("fulmar", "share:high")).containsOnly(0.5);
        assertThat(slices.standing("fulmar")).containsOnly("up");
    }

    @Test
    void slices_overPlays_addUpToWhatThePlaysSay() throws Exception {
        Played played = Small.record(Series.of(Small.drill(), 5, PLAYS), 2, folder.resolve("run"));
        RunData run = RunData.read(RunFolder.existing(folder.resolve("run")));
        double offered = Arrays.stream(run.slices().numbers("offered:mean")).sum();
        double failed = Arrays.stream(run.slices().numbers("failed:mean")).sum();
        double share = Arrays.stream(played.values(0)).average().orElseThrow();
        assertThat(failed / offered).isCloseTo(share, within(0.02 * share));
        assertThat(Arrays.stream(run.slices().numbers("offered:low"))).allMatch(low -> low > 0 && low < 25);
        for (int slice = 0; slice < run.slices().rows(); slice++) {
            double median = run.slices().numbers("p50_ms")[slice];
            assertThat(run.slices().numbers("p50_ms:low")[slice]).isLessThanOrEqualTo(median);
            assertThat(run.slices().numbers("p50_ms:high")[slice]).isGreaterThanOrEqualTo(median);
        }
        assertThat(run.standings().get(0).backend()).isEqualTo("fulmar");
        assertThat(run.standings().get(0).to()).isEqualTo("down");
        assertThat(run.standings().get(0).share()).isEqualTo(1);
        double detected = played.spread(1).median() / 1e9;
        assertThat(run.standings().get(0).at()).isCloseTo(2 + detected, within(1e-5));
    }

    @Test
    void cancel_betweenPlays_keepsTheFirstOnesAsIfNoMoreHadBeenAskedFor() throws Exception {
        Played cut = Small.record(Series.of(Small.drill(), 5, 5_000), 2, folder.resolve("cut"), (plays, play) -> {
            if (play.number() == 6) {
                plays.cancel();
            }
        });
        assertThat(cut.plays().size()).isBetween(7, 4_999);
        assertThat(cut.complete()).isFalse();
        int kept = cut.plays().size();
        Small.record(Series.of(Small.drill(), 5, kept), 1, folder.resolve("whole"));
        for (String name : List.of("plays.csv", "slices.csv", "standing.csv", "latency.hlog", "junit.xml")) {
            String all = Files.readString(folder.resolve("whole").resolve(name));
            assertThat(Files.readString(folder.resolve("cut").resolve(name)).equals(all))
                    .as(name)
                    .isTrue();
        }
        RunData run = RunData.read(RunFolder.existing(folder.resolve("cut")));
        assertThat(run.ended()).isEqualTo("interrupted");
        assertThat(run.forecast().plays()).isEqualTo(kept);
        assertThat(run.forecast().wanted()).isEqualTo(5_000);
    }
}
