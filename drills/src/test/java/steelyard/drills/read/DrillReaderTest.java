package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.tuple;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.EnumSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.stream.Collectors;
import java.util.stream.IntStream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.drills.model.Affinity;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Bench;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Delay;
import steelyard.drills.model.Drain;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Forwarded;
import steelyard.drills.model.Front;
import steelyard.drills.model.Hashing;
import steelyard.drills.model.Host;
import steelyard.drills.model.InFlight;
import steelyard.drills.model.Limits;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Picking;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Reserve;
import steelyard.drills.model.Retry;
import steelyard.drills.model.Retune;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Stage;
import steelyard.drills.model.Standing;
import steelyard.drills.model.Target;
import steelyard.drills.model.Timeouts;
import steelyard.drills.model.Trace;
import steelyard.drills.model.Traffic;
import steelyard.drills.model.WarmUp;
import steelyard.drills.model.Wire;

class DrillReaderTest {
    private static final long MS = 1_000_000;
    private static final long S = 1_000 * MS;

    /** The least that makes a drill. */
    private static final String LEAST = """
            drill: Least
            about: The least.
            stage: {pools: {seats: {method: round-robin, serves: {workers: 2, time: 9ms}, backends: {fulmar: , gannet: }}}}
            traffic: [{to: seats, rate: 10/s}]
            lasts: 10s
            """;

    private static final String PAGES = EveryKeyTest.FOLDER.resolve("pages").toString();

    private static Drill read(String text) {
        Parsed<Drill> parsed = DrillReader.read("drill.yaml", text, EveryKeyTest.FOLDER);
        assertThat(parsed.value()).as("%s", parsed.problems()).isPresent();
        return parsed.value().orElseThrow();
    }

    private static List<String> shown(String text) {
        return DrillReader.read("d", text).problems().stream()
                .map(Problem::toString)
                .toList();
    }

    @Test
    void read_ofTheLeastDrill_fillsInTheDefaults() {
        Drill drill = read(LEAST);
        Serves serves = new Serves(2, 64, Serves.Time.fixed(9 * MS), 512, false, 0, null);
        assertThat(drill.stage().loops()).isEqualTo(1);
        assertThat(drill.stage().connections()).isEqualTo(4_096);
        assertThat(drill.stage().hosts()).containsExactly(new Host("fulmar", 1, null), new Host("gannet", 1, null));
        assertThat(drill.stage().pools())
                .containsExactly(Pool.with("seats", Picking.by(Pool.Method.ROUND_ROBIN))
                        .of(List.of(
                                new Backend("fulmar", "fulmar", 1, "fulmar", false, serves),
                                new Backend("gannet", "gannet", 1, "gannet", false, serves))));
        assertThat(drill.traffic())
                .containsExactly(new Traffic(
                        "seats",
                        Traffic.Arrivals.POISSON,
                        List.of(new Traffic.Step(10 * S, 10)),
                        64,
                        0,
                        10 * S,
                        List.of(new Traffic.Request("GET", "/", 1, 0, Set.of()))));
        assertThat(drill.cues()).isEmpty();
        assertThat(drill.lastsNanos()).isEqualTo(10 * S);
    }

    @Test
    void read_ofAnEmptyRetry_fillsInTheDefaults() {
        Drill drill = read(LEAST.replace("method: round-robin", "method: round-robin, retry: {}"));
        assertThat(drill.stage().pool("seats").retry()).isEqualTo(new Retry(1, 0.4, 10, Set.of()));
    }

    /** Only so many lines are kept, and a problem must not be lost among notices that came before it. */
    @Test
    void read_ofAProblemAfterVeryManyNotices_saysTheProblem() {
        String idle = IntStream.range(0, 300).mapToObj(i -> "quay-" + i + ": ").collect(Collectors.joining(", "));
        String text =
                LEAST.replace("stage: {", "stage: {hosts: {" + idle + "}, ").replace("10/s", "10");
        assertThat(shown(text)).singleElement().asString().contains("'10' for 'rate' has no unit");
    }

    @Test
    void read_ofADrillWithoutExpectations_givesANotice() {
        assertThat(shown(LEAST))
                .containsExactly("d:1:1: notice: the drill expects nothing, so it cannot fail; add expect:");
    }

    @Test
    void read_ofPools_takesEverySetting() {
        Stage stage = read(EveryKeyTest.TEXT).stage();
        assertThat(stage.loops()).isEqualTo(2);
        assertThat(stage.connections()).isEqualTo(9_000);
        Pool seats = stage.pool("seats");
        assertThat(seats.probe()).isEqualTo(new Probe(Probe.Kind.HTTP, "/afloat", S, 400 * MS, 4, 1, 0.1));
        assertThat(seats.warmUp()).isEqualTo(new WarmUp(90 * S, 0.05));
        assertThat(seats.drain().limitNanos()).isEqualTo(10 * S);
        assertThat(seats.retry()).isEqualTo(new Retry(2, 0.25, 7, Set.of(502, 503)));
        assertThat(seats.timeouts()).isEqualTo(new Timeouts(2 * S, 3 * S, 30 * S));
        assertThat(seats.count()).isEqualTo(Pool.Count.CONNECTIONS);
        assertThat(seats.wire().forwarded()).isEqualTo(Forwarded.ADDED);
        assertThat(seats.wire().front().port()).isEqualTo(18080);
        assertThat(stage.pool("cargo").probe()).isEqualTo(new Probe(Probe.Kind.TCP, null, S, 400 * MS, 3, 2));
        assertThat(stage.pool("cargo").warmUp()).isEqualTo(new WarmUp(5 * S, 0.1));
    }

    @Test
    void read_ofPools_takesWhatTheyKeepTo() {
        Pool cargo = read(EveryKeyTest.TEXT).stage().pool("cargo");
        assertThat(cargo.weights()).isEqualTo(Pool.Weights.LOAD);
        assertThat(cargo.picking().affinity()).isEqualTo(new Affinity(Affinity.By.COOKIE, "berth", 600 * S));
        assertThat(cargo.health().bench()).isEqualTo(new Bench(4, 0.45, 8 * S, 15, 4 * S, 50 * S, 20 * S, 0.6));
        assertThat(cargo.health().load())
                .isEqualTo(new LoadProbe(
                        "/gauges",
                        2 * S,
                        300 * MS,
                        5 * S,
                        0.05,
                        2 * MS,
                        List.of(
                                new LoadProbe.Gauge("cpu", 0.8, 1),
                                new LoadProbe.Gauge("memory", 0.9, 2),
                                new LoadProbe.Gauge("disk", 0.95, 1))));
        assertThat(cargo.reserve()).isEqualTo(new Reserve(0.3, 0.4));
        assertThat(cargo.inFlight()).isEqualTo(new InFlight(16, 100, 500 * MS));
        assertThat(cargo.drain()).isEqualTo(new Drain(30 * S, true));
        assertThat(cargo.timeouts()).isEqualTo(new Timeouts(S, 10 * S, 60 * S, 5 * S, 6 * S));
        assertThat(cargo.limits()).isEqualTo(new Limits(4_096, 16_384, 1 << 20));
        assertThat(cargo.wire())
                .isEqualTo(new Wire(
                        new Front(0, Front.Kind.HTTP, Front.Tls.files(file("front.pem"), file("front-key.pem"))),
                        Forwarded.HIDDEN,
                        true));
    }

    @Test
    void read_ofEmptyBenchAndLoad_fillsInTheDefaults() {
        Pool pool = read(LEAST.replace("method: round-robin", "method: stride, weights: load, bench: {}, load: {}"))
                .stage()
                .pool("seats");
        // The defaults of the table of keys: 5 in a row, no share, 10 s, 20, 5 s, 1 min, 30 s, half of the pool.
        assertThat(pool.health().bench()).isEqualTo(new Bench(4, 0, 15 * S, 25, 6 * S, 90 * S, 45 * S, 0.5));
        // /load every second within 400 ms, stale after three of them, floor a tenth, free, the processor alone.
        assertThat(pool.health().load())
                .isEqualTo(
                        new LoadProbe("/load", S, 400 * MS, 3 * S, 0.1, 0, List.of(new LoadProbe.Gauge("cpu", 1, 1))));
    }

    @Test
    void read_ofLoadWithAPeriodOfItsOwn_isStaleAfterThreeOfThem() {
        Pool pool = read(LEAST.replace("method: round-robin", "method: stride, weights: load, load: {every: 2s}"))
                .stage()
                .pool("seats");
        assertThat(pool.health().load()).extracting(LoadProbe::staleAfterNanos).isEqualTo(6 * S);
    }

    @Test
    void read_ofMethods_takesWhatTheyAreTold() {
        Stage stage = read(EveryKeyTest.TEXT).stage();
        Picking mail = stage.pool("mail").picking();
        Picking quays = stage.pool("quays").picking();
        Picking tides = stage.pool("tides").picking();
        assertThat(mail.hash())
                .isEqualTo(new Hashing(Hashing.By.COOKIE, "berth", Hashing.Table.PERMUTATION, 100, 101, 1.25));
        assertThat(quays.hash())
                .isEqualTo(new Hashing(Hashing.By.HEADER, "x-berth", Hashing.Table.RING, 50, 65_537, 0));
        assertThat(quays.affinity()).isEqualTo(Affinity.byCookie());
        assertThat(tides.delay()).isEqualTo(new Delay(Delay.Candidates.ALL, 5 * S));
        assertThat(tides.affinity()).isEqualTo(Affinity.byClient());
        assertThat(stage.pool("tides").wire().front()).isEqualTo(new Front(0, Front.Kind.TCP, Front.Tls.THROW_AWAY));
        assertThat(stage.pool("mail").wire().front().tls())
                .isEqualTo(Front.Tls.store(file("front.p12"), "STORE_PASSWORD"));
    }

    @Test
    void read_ofServes_takesLawsColdCachesAndGauges() {
        Stage stage = read(EveryKeyTest.TEXT).stage();
        Backend skua = stage.pool("cargo").backends().get(0);
        Backend dunlin = stage.pool("cargo").backends().get(1);
        assertThat(skua.tier()).isEqualTo(1);
        assertThat(dunlin.tier()).isEqualTo(2);
        assertThat(skua.serves().cold()).isEqualTo(new Serves.Cold(3, 5 * S));
        assertThat(dunlin.serves().gauges())
                .containsExactly(new Serves.Gauge("memory", 0.3, 0.005), new Serves.Gauge("disk", 0.2, 0));
        assertThat(dunlin.serves().time()).isEqualTo(Serves.Time.gamma(12 * MS, 2));
        // times.csv: 12 ms, 1.5 s and 9 ms in column took.
        assertThat(stage.pool("mail").backends().get(0).serves().time())
                .isEqualTo(Serves.Time.trace(new Trace(
                        "times.csv", "took", Trace.Order.REPLAYED, Trace.Nanos.of(12 * MS, 1_500 * MS, 9 * MS))));
    }

    @Test
    void read_ofAnUpgrade_takesItsHeadersAndHowLongItStaysOpen() {
        assertThat(read(EveryKeyTest.TEXT).traffic().get(2).requests())
                .containsExactly(new Traffic.Request(
                        "GET",
                        "/berths/{client}",
                        1,
                        0,
                        Set.of(),
                        Map.of("x-shore", "north-{client}"),
                        "websocket",
                        3 * S));
    }

    @Test
    void read_ofARetune_takesOnlyTheKeysThatAreGiven() {
        Drill drill = read(EveryKeyTest.TEXT);
        Retune whole = cue(drill, "retune pool cargo").settings().retune();
        assertThat(whole)
                .isEqualTo(new Retune(
                        new Retune.ProbeChange(500 * MS, 200 * MS, 2, 3, 0.05), 5 * S, Pool.Method.TWO_CHOICES));
        Retune part = DrillReader.readCue("{retune: seats, probe: {misses: 5}}", drill)
                .value()
                .orElseThrow()
                .settings()
                .retune();
        assertThat(part).isEqualTo(new Retune(new Retune.ProbeChange(null, null, 5, null, null), null, null));
        assertThat(part.probe().of(new Probe(Probe.Kind.HTTP, "/afloat", S, 400 * MS, 4, 1, 0.1)))
                .isEqualTo(new Probe(Probe.Kind.HTTP, "/afloat", S, 400 * MS, 5, 1, 0.1));
    }

    @Test
    void read_ofGaugeCues_takesGaugeAndValue() {
        Drill drill = read(EveryKeyTest.TEXT);
        assertThat(cue(drill, "load skua").settings().gauge()).isEqualTo("memory");
        assertThat(cue(drill, "load skua").settings().to()).isEqualTo(0.9);
        assertThat(cue(drill, "load skua").forNanos()).isEqualTo(5 * S);
        assertThat(cue(drill, "fill pool cargo").settings().to()).isEqualTo(0.95);
    }

    @Test
    void read_ofBackends_laysTheirOwnServesOverThePools() {
        List<Backend> backends = read(EveryKeyTest.TEXT).stage().pool("seats").backends();
        Serves pool = new Serves(8, 16, Serves.Time.lognormal(12 * MS, 60 * MS), 4096, true, 0.01, PAGES);
        Serves fulmar = new Serves(8, 16, Serves.Time.fixed(9 * MS), 4096, true, 0.01, PAGES);
        Serves gannet = new Serves(8, 0, Serves.Time.exponential(20 * MS), 4096, true, 0.01, PAGES);
        assertThat(backends)
                .containsExactly(
                        new Backend("fulmar", "fulmar", 3, "north-quay", true, fulmar),
                        new Backend("gannet-1", "gannet", 1, "south-quay", false, gannet),
                        new Backend("gannet-2", "gannet", 1, "south-quay", false, gannet),
                        new Backend("gannet-3", "gannet", 1, "south-quay", false, gannet),
                        new Backend("petrel", "petrel", 1, "petrel", false, pool));
    }

    @Test
    void read_ofCues_placesNamesRepeatsAndSorts() {
        List<Cue> cues = read(EveryKeyTest.TEXT).cues();
        assertThat(cues)
                .extracting(Cue::name, Cue::atNanos)
                .startsWith(
                        tuple("fulmar dies", 15 * S),
                        tuple("slow gannet-1, skua", 20_500 * MS),
                        tuple("fulmar returns", 21 * S),
                        tuple("gannet errs", 30 * S),
                        tuple("gannet errs 2", 40 * S),
                        tuple("refuse zone north", 40 * S),
                        tuple("hang host north-quay", 41 * S),
                        tuple("fail-probe pool cargo", 41 * S))
                .endsWith(tuple("surge pool seats", 48 * S), tuple("gannet errs 3", 50 * S));
    }

    @Test
    void read_ofCues_resolvesTargetsInStageOrder() {
        Drill drill = read(EveryKeyTest.TEXT);
        assertThat(cue(drill, "gannet errs").target())
                .isEqualTo(new Target(Target.Kind.BACKENDS, "gannet", List.of("gannet-1", "gannet-2", "gannet-3")));
        assertThat(cue(drill, "refuse zone north").target())
                .isEqualTo(new Target(Target.Kind.ZONE, "north", List.of("fulmar")));
        assertThat(cue(drill, "surge pool seats").target().backends())
                .containsExactly("fulmar", "gannet-1", "gannet-2", "gannet-3", "petrel");
        assertThat(cue(drill, "slow gannet-1, skua").target().backends()).containsExactly("gannet-1", "skua");
    }

    @Test
    void read_ofCues_takesTheirSettings() {
        Drill drill = read(EveryKeyTest.TEXT);
        assertThat(cue(drill, "slow gannet-1, skua").settings())
                .isEqualTo(new Cue.Settings(8, 5 * MS, 1, 500, false, true, 0, 0, 0));
        assertThat(cue(drill, "gannet errs").settings())
                .isEqualTo(new Cue.Settings(1, 0, 0.2, 503, true, true, 0, 0, 0));
        assertThat(cue(drill, "gannet errs").forNanos()).isEqualTo(2 * S);
        assertThat(cue(drill, "reweigh petrel").settings().weight()).isEqualTo(9);
        assertThat(cue(drill, "skua drains").settings().limitNanos()).isEqualTo(3 * S);
        assertThat(cue(drill, "flap-probe petrel").settings().periodNanos()).isEqualTo(4 * S);
        assertThat(cue(drill, "fulmar returns").settings()).isEqualTo(Cue.Settings.NONE);
    }

    @Test
    void read_ofTraffic_takesStepsAndTheMix() {
        Traffic traffic = read(EveryKeyTest.TEXT).traffic().get(0);
        assertThat(traffic.steps()).containsExactly(new Traffic.Step(20 * S, 300), new Traffic.Step(100 * S, 20));
        assertThat(traffic.arrivals()).isEqualTo(Traffic.Arrivals.EVEN);
        assertThat(traffic.skew()).isEqualTo(1.1);
        assertThat(traffic.requests())
                .hasSize(7)
                .startsWith(
                        new Traffic.Request("GET", "/sailings/today", 0.4, 0, Set.of(200, 404)),
                        new Traffic.Request("HEAD", "/sailings", 0.1, 0, Set.of()),
                        new Traffic.Request("POST", "/holds", 0.1, 512, Set.of()));
    }

    @Test
    void read_ofExpectations_resolvesWindowsOptionsAndBounds() {
        List<Expectation> all = read(EveryKeyTest.TEXT).expectations();
        Expectation failed = all.get(0);
        assertThat(failed.of()).isNull();
        assertThat(failed.pool()).isEqualTo("seats");
        assertThat(failed.fromNanos()).isEqualTo(S);
        assertThat(failed.toNanos()).isEqualTo(15 * S);
        assertThat(failed.options().causes()).isEqualTo(EnumSet.of(Cause.REFUSED, Cause.RESET));
        assertThat(failed.options().worstNanos()).isEqualTo(S);
        assertThat(failed.bound()).isEqualTo(new Expectation.Bound(Double.NEGATIVE_INFINITY, 0.005));
        assertThat(all.get(1).options().outageShare()).isEqualTo(0.4);
        assertThat(all.get(2).options().quantile()).isEqualTo(0.999);
        assertThat(all.get(3).options().quantile()).isEqualTo(-1);
        assertThat(all.get(3).bound()).isEqualTo(new Expectation.Bound(1 * MS, 50 * MS));
        assertThat(all.get(6).options().shown()).isTrue();
        assertThat(all.get(6).bound().most()).isEqualTo(4);
    }

    @Test
    void read_ofAMeasureFromACue_takesTheTargetAndInstantOfTheCue() {
        Expectation detected = read(EveryKeyTest.TEXT).expectations().get(5);
        assertThat(detected.measure()).isEqualTo(Measure.DETECTED_IN);
        assertThat(detected.of()).isEqualTo(new Target(Target.Kind.BACKENDS, "fulmar", List.of("fulmar")));
        assertThat(detected.after()).isEqualTo("fulmar dies");
        assertThat(detected.fromNanos()).isEqualTo(15 * S);
        assertThat(detected.toNanos()).isEqualTo(120 * S);
        assertThat(detected.options().until()).isEqualTo(Standing.DOWN);
    }

    @Test
    void read_ofAFile_findsAnswersBesideIt(@TempDir Path folder) throws IOException {
        String text = LEAST.replace("workers: 2", "workers: 2, answers: pages");
        Path file = Files.writeString(folder.resolve("drill.yaml"), text);
        assertThat(DrillReader.read(file).problems())
                .singleElement()
                .hasToString(
                        file + ":3:76: there is no folder 'pages'; name a folder of mapping files, beginning at the"
                                + " folder of the drill");
        Path pages = Files.createDirectory(folder.resolve("pages"));
        Drill drill = DrillReader.read(file).value().orElseThrow();
        assertThat(drill.stage().backends().get(0).serves().answers()).isEqualTo(pages.toString());
    }

    @ParameterizedTest
    @CsvSource({
        "patch + 5s + 500ms, patch + 5500ms",
        "patch + 5s - 7s, patch - 2s",
        "patch + 1ms + 5us, patch + 1005us",
        "5s + 500ms, 5500ms"
    })
    void read_ofAnInstantWithSeveralDurations_saysItInOne(String written, String instead) {
        String text = LEAST + "cues: [{at: 500ms, kill: fulmar, as: patch}, {at: " + written + ", revive: fulmar}]\n"
                + "expect: [{measure: failed, at-most: 1%}]\n";
        assertThat(shown(text))
                .singleElement()
                .asString()
                .endsWith("an instant takes one duration, and '" + written + "' for 'at' has more; write " + instead);
    }

    @Test
    void read_ofWeightsThatACueBringsIntoPlay_givesNoNotice() {
        String text = LEAST.replace("fulmar: ,", "fulmar: {weight: 2},")
                + "cues: [{at: 500ms, retune: {pool: seats}, method: %s}]\n"
                + "expect: [{measure: failed, at-most: 1%%}]\n";
        assertThat(shown(text.formatted("weighted-round-robin"))).isEmpty();
        assertThat(shown(text.formatted("random"))).singleElement().asString().contains("weights play no part");
    }

    @Test
    void read_ofSettingsWithoutEffect_givesNotices() {
        String text = LEAST.replace("fulmar: ,", "fulmar: {weight: 2},")
                + "expect: [{measure: cut, at-most: 0}, {measure: share, of: {pool: seats}, at-least: 1%}]\n";
        assertThat(shown(text))
                .containsExactly(
                        "d:3:99: notice: under round-robin weights play no part; write method: weighted-round-robin to use them",
                        "d:6:38: notice: share is always 100 %, since it names the whole pool; name some of its backends");
    }

    @Test
    void read_ofProbeLossThatNoProbeMeets_givesANotice() {
        String text = LEAST.replace("fulmar: ,", "fulmar: {serves: {probe-loss: 1%}},")
                + "expect: [{measure: failed, at-most: 1%}]\n";
        assertThat(shown(text))
                .singleElement()
                .asString()
                .endsWith("notice: probe-loss plays no part, since nothing probes; write probe: {path: /afloat} for the"
                        + " pool");
        String tcp = text.replace("method:", "probe: {kind: tcp}, method:");
        assertThat(shown(tcp)).singleElement().asString().contains("since a tcp probe only connects");
    }

    @Test
    void read_ofAProbeFaultWithoutProbes_givesANotice() {
        String text = LEAST + "cues: [{at: 1s, fail-probe: fulmar}]\nexpect: [{measure: failed, at-most: 1%}]\n";
        assertThat(shown(text))
                .containsExactly(
                        "d:6:8: notice: fail-probe does nothing in a pool without probes; write probe: {path: /afloat} for the pool");
    }

    @Test
    void readCue_ofNothing_saysHowToWriteOne() {
        assertThat(DrillReader.readCue(" ", read(LEAST)).problems())
                .singleElement()
                .hasToString("cue:1:1: there is no cue; write one, such as kill: fulmar");
        assertThat(DrillReader.readCue("kill fulmar", read(LEAST)).problems())
                .singleElement()
                .hasToString("cue:1:1: a cue is written here as a single value; write it like {at: 15s, kill: fulmar}");
    }

    @Test
    void readCue_typedInAnyStyle_takesThePathOfACueOfTheFile() {
        Drill drill = read(EveryKeyTest.TEXT);
        Cue braces = DrillReader.readCue("{slow: gannet-2, factor: 3, for: 2s}", drill)
                .value()
                .orElseThrow();
        Cue bare =
                DrillReader.readCue("kill: {host: north-quay}", drill).value().orElseThrow();
        assertThat(braces)
                .isEqualTo(new Cue(
                        "slow gannet-2",
                        0,
                        Cue.Kind.SLOW,
                        new Target(Target.Kind.BACKENDS, "gannet-2", List.of("gannet-2")),
                        new Cue.Settings(3, 0, 1, 500, false, false, 0, 0, 0),
                        2 * S));
        assertThat(bare.target().backends()).containsExactly("fulmar");
    }

    @Test
    void readCue_withTheNameOfAnother_isNamedApart() {
        Drill drill = read(EveryKeyTest.TEXT);
        assertThat(DrillReader.readCue("admit: skua", drill)
                        .value()
                        .orElseThrow()
                        .name())
                .isEqualTo("admit skua 2");
        assertThat(DrillReader.readCue("{admit: skua, as: fulmar dies}", drill).problems())
                .singleElement()
                .hasToString("cue:1:19: a cue named 'fulmar dies' is there twice; rename one; the drill has it");
    }

    @Test
    void readCue_countingFromACueOfTheDrill_isPlacedInThePlay() {
        Cue cue = DrillReader.readCue("{at: fulmar dies + 1s, heal: petrel}", read(EveryKeyTest.TEXT))
                .value()
                .orElseThrow();
        assertThat(cue.atNanos()).isEqualTo(16 * S);
    }

    @Test
    void readCue_thatCannotBePlayed_saysEveryProblem() {
        assertThat(DrillReader.readCue("{slow: gannet-9, times: 3, every: 1s}", read(EveryKeyTest.TEXT))
                        .problems())
                .extracting(Problem::toString)
                .containsExactly(
                        "cue:1:1: slow needs 'factor' or 'plus'; write factor: 5, or plus: 100ms",
                        "cue:1:8: there is no backend 'gannet-9'; did you mean 'gannet-1'?",
                        "cue:1:18: a cue sent by hand is played once; leave out times",
                        "cue:1:28: a cue sent by hand is played once; leave out every");
    }

    private static String file(String name) {
        return EveryKeyTest.FOLDER.resolve(name).toString();
    }

    private static Cue cue(Drill drill, String name) {
        return drill.cue(name).orElseThrow();
    }
}
