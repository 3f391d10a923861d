package steelyard.browser;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.nio.file.Path;
import java.util.concurrent.ConcurrentLinkedQueue;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Machine;
import steelyard.harness.record.Recorder;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.RunHead;
import steelyard.harness.record.Tee;
import steelyard.harness.report.Report;
import steelyard.harness.stage.Stage;
import steelyard.harness.stage.virtual.Transport;
import steelyard.harness.stage.virtual.VirtualStage;

/** What the page works out of a play's latencies is what the judge found. */
class LatencyPageTest {
    private static final long SEED = 11;
    private static final String TEXT = """
            drill: Slow for a while
            about: Latencies of many sizes, and no failure.
            stage:
              pools:
                seats:
                  method: round-robin
                  serves: {workers: 64, queue: 64, time: {lognormal: {median: 12ms, 99%: 90ms}}}
                  backends: {fulmar: {}, gannet: {}}
            traffic:
              - {to: seats, rate: 200/s, give-up: 20s}
            lasts: 12s
            cues:
              - {at: 4s, slow: fulmar, factor: 6, for: 3s, as: brown out}
            expect:
              - {measure: latency, quantile: 95%, from: 4s, to: 7s, at-most: 20s}
            """;

    @TempDir
    private Path folder;

    private RunData play() throws Exception {
        Drill drill = DrillReader.read("slow.yaml", TEXT).value().orElseThrow();
        Cast cast = new Cast(drill);
        RunHead head = new RunHead(drill, TEXT, "virtual", "embedded", SEED, "0");
        Recorder recorder = new Recorder(
                RunFolder.create(folder.resolve("run")),
                head,
                cast,
                new Machine("2020-02-02T02:02:02Z", 1, 1, "any", "17", "none", null));
        Judge judge = new Judge(drill, cast);
        try (Stage stage = new VirtualStage(drill, SEED, Transport.USUAL)) {
            stage.open(new Tee(recorder, judge));
            stage.play(new Conductor(drill, new Chance(SEED), new ConcurrentLinkedQueue<>()));
        }
        recorder.finish(judge.verdict());
        Report.write(folder.resolve("run"));
        return RunData.read(RunFolder.existing(folder.resolve("run")));
    }

    private static double millis(Iterable<RunData.FindingRow> rows, String text) {
        for (RunData.FindingRow row : rows) {
            if (row.text().startsWith(text)) {
                return row.value() * 1e3;
            }
        }
        throw new AssertionError(text);
    }

    private static double shown(Chromium browser, String quantile) {
        String value = (String) browser.run(
                "return [...document.querySelectorAll('#readout .requests p')]"
                        + ".find(each => each.querySelector('.name').textContent === arguments[0])"
                        + ".querySelector('.value').textContent",
                quantile);
        return Double.parseDouble(value);
    }

    @Test
    void quantiles_onThePage_areThoseOfTheMeasures() throws Exception {
        RunData run = play();
        try (Chromium browser = Chromium.start()) {
            browser.open(folder.resolve("run/report.html"), 1400, "light");

            for (String quantile : new String[] {"50 %", "95 %", "99 %"}) {
                assertThat(shown(browser, quantile))
                        .as(quantile)
                        .isCloseTo(millis(run.measures(), "latency " + quantile), within(0.5));
            }
            // The only stretch that the two cues, start and end of the brown out, open within the play.
            String row =
                    (String) browser.run("return [...document.querySelectorAll('.stretches tbody tr')][1].textContent");
            assertThat(row).contains("4 to 7 s", "brown out");
            String after =
                    (String) browser.run("return [...document.querySelectorAll('.stretches tbody tr')][2].textContent");
            assertThat(after).contains("brown out ends");
            assertThat(browser.run(
                            "return [...document.querySelectorAll('.cue')].map(each => each.textContent).join()"))
                    .isEqualTo("brown out,brown out ends");
        }
    }
}
