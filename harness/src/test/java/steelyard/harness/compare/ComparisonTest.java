package steelyard.harness.compare;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.EnumSet;
import java.util.Set;
import java.util.stream.DoubleStream;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.drills.model.Measure;
import steelyard.harness.compare.RunsByHand.Rehearsal;

class ComparisonTest {
    private static final Set<Measure> ALL = Set.of();
    private static final String UNFIT = "{\"met\": true, \"fit\": false, \"text\": \"Unfit.\"}";

    @TempDir
    private Path folder;

    private RunsByHand runs = new RunsByHand(Path.of(""));

    @BeforeEach
    void place() {
        runs = new RunsByHand(folder);
    }

    private static Comparison compare(Path first, Path second) throws CannotCompare {
        return Comparison.of(Runs.read(first), Runs.read(second), 0.05, ALL);
    }

    private static Line line(Comparison comparison, String text) {
        return comparison.lines().stream()
                .filter(each -> each.text().equals(text))
                .findFirst()
                .orElseThrow();
    }

    private Path set(String name, double... p99) throws IOException {
        for (int at = 0; at < p99.length; at++) {
            runs.rehearsal(name + "/run-" + at, Rehearsal.of(1, 10, p99[at]));
        }
        return folder.resolve(name);
    }

    private static double[] plays(int count, double value) {
        return DoubleStream.iterate(value, each -> each + 0.0001).limit(count).toArray();
    }

    /** 10 of 1,000 beside 60 of 1,000: five times the standard error of .0098, also for three measures together. */
    @Test
    void of_twoSingleRehearsals_judgesSharesByCountsAndNothingElse() throws IOException, CannotCompare {
        Comparison comparison =
                compare(runs.rehearsal("a", Rehearsal.of(1, 10, .05)), runs.rehearsal("b", Rehearsal.of(2, 60, .5)));
        assertThat(comparison.lines())
                .extracting(Line::word)
                .containsExactly(Word.WORSE, Word.CANNOT_BE_TOLD, Word.NO_CLEAR_CHANGE);
        assertThat(line(comparison, "failed, whole play").difference().method()).isEqualTo(Difference.Method.NEWCOMBE);
        assertThat(line(comparison, "latency 99 %, whole play").note()).startsWith("one run each");
        assertThat(comparison.worse()).isTrue();
    }

    @Test
    void of_twoSingleRehearsalsNearEachOther_isNoClearChange() throws IOException, CannotCompare {
        Comparison comparison =
                compare(runs.rehearsal("a", Rehearsal.of(1, 10, .05)), runs.rehearsal("b", Rehearsal.of(1, 14, .05)));
        assertThat(line(comparison, "failed, whole play").word()).isEqualTo(Word.NO_CLEAR_CHANGE);
        assertThat(comparison.worse()).isFalse();
        assertThat(comparison.settings()).isEmpty();
    }

    @Test
    void of_twoSetsOfRehearsals_tellsByWelchWhatOneRunCouldNot() throws IOException, CannotCompare {
        Comparison worse = compare(set("a", .050, .051, .049), set("b", .080, .081, .079));
        Line latency = line(worse, "latency 99 %, whole play");
        assertThat(latency.word()).isEqualTo(Word.WORSE);
        assertThat(latency.difference().size()).isCloseTo(.03, within(1e-9));
        Comparison better = compare(set("c", .080, .081, .079), set("d", .050, .051, .049));
        assertThat(line(better, "latency 99 %, whole play").word()).isEqualTo(Word.BETTER);
        assertThat(better.worse()).isFalse();
    }

    @Test
    void of_aChangeWithinTheMargin_isNoClearChangeAndSaysSo() throws IOException, CannotCompare {
        Comparison comparison = compare(set("a", .05, .05001, .04999), set("b", .051, .05101, .05099));
        Line latency = line(comparison, "latency 99 %, whole play");
        assertThat(latency.word()).isEqualTo(Word.NO_CLEAR_CHANGE);
        assertThat(latency.note()).isEqualTo("beyond chance, but within the margin");
    }

    /** Play by play .0008 more, twice the standard error of two means whose plays scatter by .003: pairs tell it, the two means by themselves do not. */
    @Test
    void of_twoForecastsOfTheSameSeeds_comparesPlayByPlay() throws IOException, CannotCompare {
        Path first = runs.forecast("a", 1, plays(100, .01));
        Comparison paired = compare(first, runs.forecast("b", 1, plays(100, .0108)));
        assertThat(line(paired, "failed, whole play").word()).isEqualTo(Word.WORSE);
        assertThat(line(paired, "failed, whole play").difference().method()).isEqualTo(Difference.Method.PAIRED);
        Comparison apart = compare(first, runs.forecast("c", 500, plays(100, .0108)));
        assertThat(line(apart, "failed, whole play").word()).isEqualTo(Word.NO_CLEAR_CHANGE);
        assertThat(line(apart, "failed, whole play").difference().method()).isEqualTo(Difference.Method.WELCH);
    }

    @Test
    void of_aForecastAndARehearsal_looksWhetherItLiesInTheBand() throws IOException, CannotCompare {
        Path forecast = runs.forecast("a", 1, plays(100, .01));
        Comparison inside = compare(forecast, runs.rehearsal("b", Rehearsal.of(1, 15, .05)));
        assertThat(line(inside, "failed, whole play").word()).isEqualTo(Word.NO_CLEAR_CHANGE);
        Comparison above = compare(forecast, runs.rehearsal("c", Rehearsal.of(1, 40, .05)));
        assertThat(line(above, "failed, whole play").word()).isEqualTo(Word.WORSE);
        Comparison other = compare(folder.resolve("c"), forecast);
        assertThat(line(other, "failed, whole play").word()).isEqualTo(Word.BETTER);
        assertThat(other.settings()).extracting(SettingChange::setting).contains("(stage)", "(plays)", "(seeds)");
    }

    @Test
    void of_playsWithoutAValue_countsThem() throws IOException, CannotCompare {
        double[] gone = plays(100, .01);
        for (int play = 0; play < 30; play++) {
            gone[play] = Double.NaN;
        }
        Comparison comparison = compare(runs.forecast("a", 1, plays(100, .01)), runs.forecast("b", 1, gone));
        Line failed = line(comparison, "failed, whole play");
        assertThat(failed.word()).isEqualTo(Word.WORSE);
        assertThat(failed.note()).isEqualTo("without a value in 0 of 100, then in 30 of 100");
    }

    @Test
    void of_someMeasures_leavesTheOthersOut() throws IOException, CannotCompare {
        Runs first = Runs.read(runs.rehearsal("a", Rehearsal.of(1, 10, .05)));
        Comparison comparison = Comparison.of(first, first, 0.05, EnumSet.of(Measure.LATENCY));
        assertThat(comparison.lines()).extracting(Line::text).containsExactly("latency 99 %, whole play");
        assertThat(comparison.errorRate()).isEqualTo(0.05);
    }

    @Test
    void of_otherSettings_listsThemByPath() throws IOException, CannotCompare {
        String other = RunsByHand.DRILL
                .replace("misses: 3", "misses: 5")
                .replace("  - {at: 1s, kill: fulmar, as: fulmar dies}\n", "")
                .replace("at-most: 10%", "at-most: 1%")
                .replace("{every: 1s,", "{passes: 2, every: 1s,");
        Comparison comparison = compare(
                runs.rehearsal("a", Rehearsal.of(1, 10, .05)),
                runs.rehearsal("b", Rehearsal.of(2, 10, .05).from(other)));
        assertThat(comparison.settings())
                .containsExactly(
                        new SettingChange("stage.pools.seats.probe.misses", "3", "5"),
                        new SettingChange("cues.fulmar dies.at", "1s", "-"),
                        new SettingChange("cues.fulmar dies.kill", "fulmar", "-"),
                        new SettingChange("cues.fulmar dies.as", "fulmar dies", "-"),
                        new SettingChange("expect.failed", "at-most 10%", "at-most 1%"),
                        new SettingChange("stage.pools.seats.probe.passes", "-", "2"),
                        new SettingChange("(seeds)", "1", "2"));
    }

    /** Two cues by hand and one of the drill; a run without cues.csv had none. */
    @Test
    void of_aRunWithCuesByHand_listsTheirNumber() throws IOException, CannotCompare {
        Path first = runs.rehearsal("a", Rehearsal.of(1, 10, .05));
        Path second = runs.rehearsal("b", Rehearsal.of(1, 10, .05));
        Files.writeString(second.resolve("cues.csv"), """
                due,at,cue,action,by
                0.1,0.1,fulmar dies,kill fulmar,drill
                0.2,0.2,drain gannet,drain gannet,hand
                0.3,0.3,admit gannet,admit gannet,hand
                """);
        assertThat(compare(first, second).settings()).containsExactly(new SettingChange("(cues by hand)", "0", "2"));
    }

    /** {@code count: requests}, {@code passes: 2}, {@code drain: {limit: 30s}} and {@code weight: 1} are what holds without them, 1000ms is 1s. */
    @Test
    void of_writtenDefaultsAndOtherSpellings_listsNoneOfThem() throws IOException, CannotCompare {
        String plain = RunsByHand.WHOLE;
        String written = plain.replace("every: 1s,", "every: 1000ms, passes: 2,")
                .replace("fulmar: ,", "fulmar: {weight: 1},")
                .replace(
                        "      probe:",
                        "      count: requests\n      weights: backend\n      drain: {limit: 30s}\n      probe:");
        Path first = runs.rehearsal("a", Rehearsal.of(1, 10, .05).from(plain));
        assertThat(compare(first, runs.rehearsal("b", Rehearsal.of(1, 10, .05).from(written)))
                        .settings())
                .isEmpty();
        assertThat(compare(
                                first,
                                runs.rehearsal(
                                        "c",
                                        Rehearsal.of(1, 10, .05)
                                                .from(written.replace("limit: 30s", "limit: 5s")
                                                        .replace(
                                                                "misses: 3}",
                                                                "misses: 3}\n      retry: {at-most: 1}"))))
                        .settings())
                .containsExactly(
                        new SettingChange("stage.pools.seats.drain.limit", "-", "5s"),
                        new SettingChange("stage.pools.seats.retry.at-most", "-", "1"));
    }

    @Test
    void of_runsOfTwoDrills_isRefusedWithTheirTitles() throws IOException, CannotCompare {
        Path first = runs.rehearsal("a", Rehearsal.of(1, 10, .05));
        Path second = runs.rehearsal("b", Rehearsal.of(1, 10, .05));
        Path json = second.resolve("run.json");
        Files.writeString(json, Files.readString(json).replace("\"drill\": \"By hand\"", "\"drill\": \"By foot\""));
        assertThatThrownBy(() -> compare(first, second))
                .isInstanceOfSatisfying(
                        CannotCompare.class, it -> assertThat(it.isMisnamed()).isTrue())
                .hasMessage(second + " is of the drill 'By foot', " + first
                        + " of 'By hand'; name two runs of one drill, under one title");
    }

    @Test
    void of_aRehearsalAndAShortForecast_saysHowManyPlaysItTakes() throws IOException, CannotCompare {
        Comparison comparison =
                compare(runs.forecast("a", 1, plays(39, .01)), runs.rehearsal("b", Rehearsal.of(1, 40, .05)));
        assertThat(line(comparison, "failed, whole play").word()).isEqualTo(Word.CANNOT_BE_TOLD);
        assertThat(line(comparison, "failed, whole play").note())
                .isEqualTo("one rehearsal beside a forecast of 39 plays, 39 with a value: forecast 40 at least");
    }

    @Test
    void text_ofAComparison_isJsonWithNullForWhatThereIsNot() throws IOException, CannotCompare {
        Comparison comparison =
                compare(runs.rehearsal("a", Rehearsal.of(1, 10, .05)), runs.rehearsal("b", Rehearsal.of(2, 60, .5)));
        JsonNode json = new ObjectMapper().readTree(CompareJson.text(comparison));
        assertThat(json.path("worse").asBoolean()).isTrue();
        assertThat(json.path("measures").path(0).path("word").asText()).isEqualTo("worse");
        assertThat(json.path("measures").path(0).path("difference").asDouble()).isCloseTo(.05, within(1e-9));
        assertThat(json.path("measures").path(1).path("low").isNull()).isTrue();
        assertThat(json.path("settings").path(0).path("setting").asText()).isEqualTo("(seeds)");
    }

    private void refused(Path path, boolean misnamed, String message) {
        assertThatThrownBy(() -> Runs.read(path))
                .isInstanceOfSatisfying(
                        CannotCompare.class, it -> assertThat(it.isMisnamed()).isEqualTo(misnamed))
                .hasMessageStartingWith(folder.toString())
                .hasMessageContaining(message)
                .hasMessageNotContaining("\n");
    }

    @Test
    void read_ofWhatIsNoRun_saysWhichFolderAndWhatToDo() throws IOException, CannotCompare {
        refused(folder.resolve("none"), true, "is not a folder; name a run folder");
        refused(Files.createDirectory(folder.resolve("empty")), true, "holds no run: there is no run.json in it");
        set("set", .05, .05);
        runs.rehearsal("set/run-x", Rehearsal.of(1, 10, .05).from("drill: other"));
        refused(folder.resolve("set"), true, "is of another drill or other settings than");
        runs.forecast("mixed/a", 1, .01, .02);
        runs.rehearsal("mixed/b", Rehearsal.of(1, 10, .05));
        refused(folder.resolve("mixed"), true, "is a forecast among others");
    }

    @Test
    void read_ofARunThatTellsNothing_saysWhy() throws IOException {
        refused(
                runs.rehearsal("killed", Rehearsal.of(1, 1, 1).judged("null").ended("playing")),
                false,
                "did not come to its end");
        refused(runs.rehearsal("cut", Rehearsal.of(1, 1, 1).ended("interrupted")), false, "was interrupted");
        refused(runs.rehearsal("unfit", Rehearsal.of(1, 1, 1).judged(UNFIT)), false, "is unfit to judge");
        Path later = runs.rehearsal("later", Rehearsal.of(1, 1, 1));
        Path json = later.resolve("run.json");
        Files.writeString(json, Files.readString(json).replace("\"format\": 1", "\"format\": 2"));
        refused(later, false, "is of format 2; this version reads format 1");
        Path broken = runs.rehearsal("broken", Rehearsal.of(1, 1, 1));
        Files.writeString(broken.resolve("run.json"), "{\"format\": ");
        refused(broken, false, "cannot be read as JSON");
        Path damaged = runs.rehearsal("damaged", Rehearsal.of(1, 1, 1));
        Files.writeString(damaged.resolve("slices.csv"), "slice,offered\n0,many\n");
        refused(damaged, false, "is damaged");
        Path bare = runs.forecast("bare", 1, .1, .2);
        Files.delete(bare.resolve("plays.csv"));
        refused(bare, false, "plays.csv cannot be read");
    }
}
