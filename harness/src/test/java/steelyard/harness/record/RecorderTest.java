package steelyard.harness.record;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.record.TestDrill.FULMAR;
import static steelyard.harness.record.TestDrill.GANNET;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.S;
import static steelyard.harness.record.TestDrill.SEATS;
import static steelyard.harness.record.TestDrill.cue;
import static steelyard.harness.record.TestDrill.fulmar;

import java.io.ByteArrayInputStream;
import java.io.FileInputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import javax.xml.parsers.DocumentBuilderFactory;
import org.HdrHistogram.EncodableHistogram;
import org.HdrHistogram.HistogramLogReader;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.w3c.dom.Document;
import org.w3c.dom.Element;
import org.w3c.dom.NodeList;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Measure;
import steelyard.harness.record.PlayListener.By;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.RunData.CueRow;
import steelyard.harness.record.RunData.FindingRow;
import steelyard.harness.record.RunData.HostRow;
import steelyard.harness.record.RunData.StandingRow;
import steelyard.harness.record.RunData.VerdictRow;

class RecorderTest {
    private static final Cue KILL = cue(S, Cue.Kind.KILL, fulmar());
    private static final Drill DRILL = new TestDrill().lasts(3 * S).cue(KILL).build();
    private static final Machine MACHINE =
            new Machine("2026-12-01T12:00:00Z", 2, 8L << 30, "Linux", "17.0.2", "epoll", null);

    private static Recorder recorder(Path dir) throws FolderRefused {
        RunHead head = new RunHead(DRILL, "drill: text,\n  with \"quotes\"\n", "live", "embedded", 7, "0.1.0");
        return new Recorder(RunFolder.create(dir), head, new Cast(DRILL), MACHINE);
    }

    /** Ten requests a second; those due from 1 s on are refused; a cue and a change of standing. */
    private static void play(Recorder recorder, int slices) {
        Sample sample = new Sample(4);
        sample.effectiveWeight[FULMAR] = 0.5;
        sample.entitledShare[GANNET] = 1 / 3.0;
        for (int slice = 0; slice < slices; slice++) {
            long due = slice * 100 * MS;
            if (slice == 10) {
                recorder.cueApplied(due + 2 * MS, due, KILL, By.DRILL);
                recorder.stood(
                        new Transition(FULMAR, Standing.UP, Standing.DOWN, Transition.Cause.MISSES, due + 2_500_000));
            }
            recorder.requestDue(due, slice, 0, 0, 0);
            recorder.attemptPicked(due, SEATS, GANNET, slice, 1, 1);
            Cause cause = slice < 10 ? null : Cause.REFUSED;
            recorder.requestEnded(due + 20 * MS, slice, due, 0, 0, cause, cause == null ? 200 : 0);
            sample.busyNanos[GANNET] = due;
            recorder.sampled(due + 100 * MS, sample);
        }
    }

    private static Verdict verdict() {
        Finding missed = new Finding(
                Measure.FAILED,
                null,
                "failed, whole play",
                new Bound(Double.NEGATIVE_INFINITY, 0.003),
                "66.7 %",
                2 / 3.0,
                null);
        Finding never = new Finding(
                Measure.DETECTED_IN,
                "fulmar",
                "detected-in of fulmar, after kill fulmar",
                new Bound(1.9e9, 3.2e9),
                "never",
                Double.NaN,
                "fulmar never stopped being picked from <before> its next cue");
        Finding standard = new Finding(Measure.CUT, null, "cut, whole play", null, "0", 0, null);
        return new Verdict(
                false,
                true,
                "Not met: \"both\" missed.",
                List.of(missed, never),
                List.of(standard),
                List.of(new SelfCheck("connection cap", true, "never hit")));
    }

    @Test
    void run_writtenAndReadBack_isTheSame(@TempDir Path dir) throws Exception {
        Recorder recorder = recorder(dir.resolve("run"));
        play(recorder, 30);
        recorder.ended(3 * S, true);
        assertThat(recorder.finish(verdict()).fit()).isTrue();

        RunData run = RunData.read(RunFolder.existing(dir.resolve("run")));

        assertThat(run.drill()).isEqualTo(DRILL.name());
        assertThat(run.stage()).isEqualTo("live");
        assertThat(run.seed()).isEqualTo(7);
        assertThat(run.lasts()).isEqualTo(3);
        assertThat(run.ended()).isEqualTo("complete");
        assertThat(run.source()).isEqualTo("drill: text,\n  with \"quotes\"\n");
        assertThat(run.hosts()).contains(new HostRow("north-quay", 10, "north"), new HostRow("east-quay", 20, null));
        assertThat(run.backends()).contains(new BackendRow("skua", "cargo", "south-quay", 1));
        assertThat(run.pools().get(0).settings())
                .containsEntry("probe", "http /afloat every 1 s within 400 ms, 3 misses, 2 passes")
                .containsEntry("warm-up", "5 s from 10 %")
                .containsEntry("serves", "2 workers, queue 8, fixed 10 ms");
        assertThat(run.verdict()).isEqualTo(new VerdictRow(false, true, "Not met: \"both\" missed."));
        assertThat(run.expectations())
                .containsExactly(
                        new FindingRow(
                                "failed",
                                null,
                                "failed, whole play",
                                "at most 0.3 %",
                                "66.7 %",
                                2 / 3.0,
                                Double.NaN,
                                0.003,
                                "share",
                                "missed by 66.4 %",
                                false,
                                true,
                                null,
                                null,
                                null),
                        new FindingRow(
                                "detected-in",
                                "fulmar",
                                "detected-in of fulmar, after kill fulmar",
                                "from 1.9 s to 3.2 s",
                                "never",
                                Double.NaN,
                                1.9,
                                3.2,
                                "duration",
                                null,
                                false,
                                true,
                                "fulmar never stopped being picked from <before> its next cue",
                                null,
                                null));
        assertThat(run.measures()).hasSize(1);
        assertThat(run.checks()).containsExactly(new SelfCheck("connection cap", true, "never hit"));
        assertThat(run.machine()).containsEntry("transport", "epoll").doesNotContainKey("engine");
        assertThat(run.standings()).containsExactly(new StandingRow(1.0025, "fulmar", "up", "down", "misses", false));
        assertThat(run.cues()).containsExactly(new CueRow(1, 1.002, "kill fulmar", "kill fulmar", "drill"));
    }

    @Test
    void slices_readBack_holdEveryColumn(@TempDir Path dir) throws Exception {
        Recorder recorder = recorder(dir.resolve("run"));
        play(recorder, 30);
        recorder.ended(3 * S, true);

        Slices slices = RunData.read(RunFolder.existing(dir.resolve("run"))).slices();

        assertThat(slices.rows()).isEqualTo(30);
        assertThat(slices.numbers("from")).startsWith(0, 0.1, 0.2).endsWith(2.9);
        assertThat(slices.numbers("offered")).containsOnly(1);
        assertThat(slices.numbers("ok")[9]).isEqualTo(1);
        assertThat(slices.numbers("refused")[10]).isEqualTo(1);
        assertThat(slices.numbers("failed")[10]).isEqualTo(1);
        assertThat(slices.numbers("p99_ms")[0]).isBetween(20.0, 20.03);
        assertThat(slices.numbers("p99_ms")[10]).isNaN();
        assertThat(slices.numbers("pool seats:offered")).containsOnly(1);
        assertThat(slices.numbers("pool seats:failed")[9]).isZero();
        assertThat(slices.numbers("pool seats:failed")[10]).isEqualTo(1);
        assertThat(slices.numbers("pool cargo:offered")).containsOnly(0);
        assertThat(slices.numbers("gannet", "picked")).containsOnly(1);
        assertThat(slices.numbers("gannet", "entitled")[3]).isEqualTo(0.333333);
        assertThat(slices.numbers("gannet", "utilisation")[0]).isZero();
        assertThat(slices.numbers("gannet", "utilisation")[5]).isEqualTo(0.5);
        assertThat(slices.numbers("fulmar", "weight")[3]).isEqualTo(0.5);
        assertThat(slices.standing("fulmar")).containsOnly("up").hasSize(30);
    }

    @Test
    void run_killed_leavesWhatItHad(@TempDir Path dir) throws Exception {
        Path folder = dir.resolve("run");
        Recorder recorder = recorder(folder);
        play(recorder, 25);
        // A kill loses what was not flushed: take away half of the last row as well.
        Path rows = folder.resolve(RunFolder.SLICES);
        byte[] bytes = Files.readAllBytes(rows);
        Path copy = Files.createDirectory(dir.resolve("killed"));
        for (String name : List.of("run.json", "machine.json", "standing.csv", "cues.csv")) {
            Files.copy(folder.resolve(name), copy.resolve(name));
        }
        Files.write(copy.resolve(RunFolder.SLICES), java.util.Arrays.copyOf(bytes, bytes.length - 20));

        RunData run = RunData.read(RunFolder.existing(copy));

        assertThat(run.verdict()).isNull();
        assertThat(run.ended()).isEqualTo("playing");
        assertThat(run.expectations()).isEmpty();
        // Flushed at 2 s: slices that were settled by then, less the last row.
        assertThat(run.slices().rows()).isBetween(14, 16);
        assertThat(run.slices().numbers("offered")).containsOnly(1);
        assertThat(run.cues()).hasSize(1);
        recorder.ended(2_500 * MS, false);
    }

    @Test
    void latencyLog_readBack_holdsGoodAnswersBySlice(@TempDir Path dir) throws Exception {
        Path folder = dir.resolve("run");
        Recorder recorder = recorder(folder);
        play(recorder, 30);
        recorder.ended(3 * S, true);

        List<EncodableHistogram> slices = new ArrayList<>();
        try (HistogramLogReader reader = new HistogramLogReader(
                new FileInputStream(folder.resolve("latency.hlog").toFile()))) {
            while (reader.hasNext()) {
                slices.add(reader.nextIntervalHistogram());
            }
        }
        // Only the first second had good answers, one in each slice, each after 20 ms; all of the first of two pools.
        assertThat(slices).hasSize(20);
        assertThat(slices).filteredOn(each -> "seats".equals(each.getTag())).hasSize(10);
        slices.removeIf(each -> each.getTag() != null);
        assertThat(slices.get(3).getStartTimeStamp()).isEqualTo(300);
        assertThat(slices.get(3).getMaxValueAsDouble()).isBetween(20e6, 20.03e6);
        SliceLatencies read = SliceLatencies.read(RunFolder.existing(folder));
        assertThat(read.known()).isTrue();
        assertThat(read.of(3).getTotalCount()).isEqualTo(1);
        assertThat(read.of(10)).isNull();
        assertThat(read.quantile(0, 30, 0.5)).isBetween(20e6, 20.03e6);
        assertThat(read.quantile(10, 30, 0.5)).isNaN();
        assertThat(Files.readString(folder.resolve("latency.hlog"))).doesNotContain("StartTime: 1", "2026", "1970");
    }

    @Test
    void files_ofTwoPlaysOfOneSeed_differInMachineAlone(@TempDir Path dir) throws Exception {
        for (String name : List.of("one", "two")) {
            Recorder recorder = recorder(dir.resolve(name));
            play(recorder, 30);
            recorder.ended(3 * S, true);
            recorder.finish(verdict());
        }
        try (var files = Files.list(dir.resolve("one"))) {
            List<String> names =
                    files.map(each -> each.getFileName().toString()).sorted().toList();
            assertThat(names)
                    .containsExactly(
                            "cues.csv",
                            "junit.xml",
                            "latency.hlog",
                            "machine.json",
                            "run.json",
                            "slices.csv",
                            "standing.csv",
                            "verdict.json");
            for (String name : names) {
                assertThat(dir.resolve("one").resolve(name))
                        .hasSameBinaryContentAs(dir.resolve("two").resolve(name));
            }
        }
    }

    @Test
    void junit_parsedByTheJdk_namesEveryExpectation(@TempDir Path dir) throws Exception {
        Path folder = dir.resolve("run");
        Recorder recorder = recorder(folder);
        recorder.ended(0, true);
        recorder.finish(verdict().with(new SelfCheck("a check", false, "told <twice> & more")));

        Document document = DocumentBuilderFactory.newInstance()
                .newDocumentBuilder()
                .parse(new ByteArrayInputStream(Files.readAllBytes(folder.resolve(RunFolder.JUNIT))));
        Element suite = document.getDocumentElement();
        NodeList cases = suite.getElementsByTagName("testcase");
        NodeList failures = suite.getElementsByTagName("failure");

        assertThat(suite.getTagName()).isEqualTo("testsuite");
        assertThat(suite.getAttribute("name")).isEqualTo(DRILL.name());
        assertThat(suite.getAttribute("tests")).isEqualTo("3");
        assertThat(suite.getAttribute("failures")).isEqualTo("3");
        assertThat(suite.hasAttribute("timestamp")).isFalse();
        assertThat(((Element) cases.item(0)).getAttribute("name")).isEqualTo("failed, whole play: at most 0.3 %");
        assertThat(((Element) cases.item(2)).getAttribute("name")).isEqualTo("fit to judge");
        assertThat(((Element) cases.item(2)).getAttribute("classname")).isEqualTo("steelyard." + DRILL.name());
        assertThat(((Element) failures.item(0)).getAttribute("message"))
                .isEqualTo("the play is unfit to judge; bound at most 0.3 %, measured 66.7 %");
        assertThat(((Element) failures.item(2)).getAttribute("message"))
                .isEqualTo("unfit to judge: a check: told <twice> & more");
    }

    @Test
    void verdictJson_isAsDesigned(@TempDir Path dir) throws Exception {
        Recorder recorder = recorder(dir.resolve("run"));
        recorder.ended(0, true);
        recorder.finish(verdict());

        assertThat(Files.readString(dir.resolve("run/verdict.json"), StandardCharsets.UTF_8))
                .isEqualToIgnoringWhitespace("""
                        {"drill": "Lose one, \\"at the peak\\" & <after>", "stage": "live", "met": false, "fit": true,
                         "exit": 1, "text": "Not met: \\"both\\" missed.", "handCues": 0,
                         "expectations": [
                          {"measure": "failed", "of": null, "text": "failed, whole play", "bound": "at most 0.3 %",
                           "measured": "66.7 %", "met": false, "value": 0.6666666666666666, "least": null,
                           "most": 0.003, "unit": "share"},
                          {"measure": "detected-in", "of": "fulmar", "text": "detected-in of fulmar, after kill fulmar",
                           "bound": "from 1.9 s to 3.2 s", "measured": "never", "met": false, "value": null,
                           "least": 1.9, "most": 3.2, "unit": "duration"}]}
                        """);
    }

    @Test
    void finish_expectationNotReached_isNeitherMetNorMissed(@TempDir Path dir) throws Exception {
        Recorder recorder = recorder(dir.resolve("run"));
        recorder.interrupted(0);
        recorder.ended(0, false);
        Finding ahead = new Finding(
                Measure.FAILED,
                null,
                "failed, whole play",
                new Bound(Double.NEGATIVE_INFINITY, 0.003),
                "not measured",
                Double.NaN,
                null,
                false);
        recorder.finish(new Verdict(false, false, "Interrupted.", List.of(ahead), List.of(), List.of()));

        RunData run = RunData.read(RunFolder.existing(dir.resolve("run")));
        assertThat(run.expectations().get(0).reached()).isFalse();
        assertThat(run.expectations().get(0).met()).isFalse();
        assertThat(Files.readString(dir.resolve("run/verdict.json"))).contains("\"met\": null", "\"exit\": 3");
        assertThat(Files.readString(dir.resolve("run/junit.xml")))
                .contains("skipped=\"1\"", "<skipped message=\"not reached\"/>");
    }

    @Test
    void finish_cuesByHand_areSaidInEveryFile(@TempDir Path dir) throws Exception {
        Recorder recorder = recorder(dir.resolve("run"));
        recorder.cueApplied(S, S, KILL, By.DRILL);
        recorder.cueApplied(S, S, KILL, By.HAND);
        recorder.cueApplied(2 * S, 2 * S, KILL, By.HAND);
        recorder.cueApplied(2 * S, 2 * S, KILL, By.END);
        recorder.ended(3 * S, true);

        Verdict verdict = recorder.finish(verdict());

        assertThat(verdict.text()).isEqualTo("Not met: \"both\" missed, with 2 cues by hand.");
        assertThat(verdict.handCues()).isEqualTo(2);
        RunData run = RunData.read(RunFolder.existing(dir.resolve("run")));
        assertThat(run.verdict()).isEqualTo(new VerdictRow(false, true, verdict.text()));
        assertThat(run.handCues()).isEqualTo(2);
        assertThat(Files.readString(dir.resolve("run/run.json"))).contains("\"handCues\": 2");
        assertThat(Files.readString(dir.resolve("run/verdict.json"))).contains("\"handCues\": 2");
        assertThat(Files.readString(dir.resolve("run/junit.xml")))
                .contains("<properties><property name=\"handCues\" value=\"2\"/></properties>");
    }

    @Test
    void cue_endOfItsTime_isNamedAsAnEnd(@TempDir Path dir) throws Exception {
        Recorder recorder = recorder(dir.resolve("run"));
        recorder.cueApplied(S, S, KILL, By.DRILL);
        recorder.cueApplied(2 * S, 2 * S, KILL, By.END);
        recorder.ended(3 * S, true);

        assertThat(RunData.read(RunFolder.existing(dir.resolve("run"))).cues())
                .containsExactly(
                        new CueRow(1, 1, "kill fulmar", "kill fulmar", "drill"),
                        new CueRow(2, 2, "kill fulmar ends", "end of kill fulmar", "end"));
    }

    @Test
    void finish_folderGone_isUnfitAndSaysWhyInOneLine(@TempDir Path dir) throws Exception {
        Path folder = dir.resolve("run");
        Recorder recorder = recorder(folder);
        recorder.ended(0, true);
        delete(folder);

        Verdict verdict = recorder.finish(verdict());

        assertThat(verdict.fit()).isFalse();
        assertThat(recorder.trouble())
                .startsWith("the run is incomplete: " + folder.resolve("verdict.json") + " could not be written (")
                .doesNotContain("\n");
        assertThat(verdict.text()).isEqualTo("Unfit to judge: " + recorder.trouble() + ".");
    }

    @Test
    void rowFile_cannotBeOpened_isRememberedAndSwallowsRows(@TempDir Path dir) {
        Trouble trouble = new Trouble();
        RowFile rows = new RowFile(dir, trouble);
        rows.row().append("lost");
        rows.write();
        rows.flush();
        rows.close();

        assertThat(trouble.line()).startsWith("the run is incomplete: " + dir + " could not be written");
    }

    private static void delete(Path folder) throws IOException {
        try (var files = Files.list(folder)) {
            for (Path each : files.toList()) {
                Files.delete(each);
            }
        }
        Files.delete(folder);
    }
}
