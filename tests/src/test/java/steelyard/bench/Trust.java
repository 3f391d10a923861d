package steelyard.bench;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Measure.Unit;
import steelyard.drills.read.DrillLibrary;
import steelyard.drills.read.DrillReader;
import steelyard.harness.forecast.Figure;
import steelyard.harness.forecast.Played;
import steelyard.harness.forecast.Plays;
import steelyard.harness.forecast.Series;
import steelyard.harness.forecast.Spread;
import steelyard.harness.record.Wording;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.virtual.Transport;

/**
 * Forecast beside rehearsal: every bundled drill that can be rehearsed is forecast over 200 seeds and rehearsed three times
 * under other seeds; a rehearsal's measure should lie in the forecast's 95 % band.
 *
 * <p>The measures are fixed beforehand: all that the drill expects and the standard set, but for those that are constant in
 * the forecast. What a hop costs is measured before anything is compared, and nothing is fitted. Writes the table to the
 * file that its first argument names, and closes with the share inside.
 */
public final class Trust {
    private static final int PLAYS = 200;
    private static final int REHEARSALS = 3;
    private static final long FIRST_SEED = 1;
    private static final long FIRST_LIVE_SEED = 9_001;
    private static final double MOST_A_SECOND = 20_000;

    private final Path launcher;
    private final Path work;
    private final Transport transport;
    private final List<String> lines = new ArrayList<>();
    private final List<String> misses = new ArrayList<>();
    private int compared;
    private int inside;

    private Trust(Path launcher, Path work, Transport transport) {
        this.launcher = launcher;
        this.work = work;
        this.transport = transport;
    }

    /** Takes the file for the table and the launcher. */
    public static void main(String[] args) throws Exception {
        Path table = Path.of(args[0]);
        Transport transport = MeasuredTransport.now();
        say("a hop takes %.0f us here", transport.hopNanos() / 1e3);
        Trust trust = new Trust(Path.of(args[1]), Files.createTempDirectory("trust"), transport);
        for (String name : DrillLibrary.names()) {
            trust.compare(name);
        }
        trust.write(table);
        say("inside-band: %.3f", (double) trust.inside / trust.compared);
    }

    private void compare(String name) throws IOException, InterruptedException, CannotPlay {
        Drill drill = DrillReader.read(name, DrillLibrary.text(name).orElseThrow())
                .value()
                .orElseThrow();
        if (rate(drill) > MOST_A_SECOND) {
            return;
        }
        Played forecast;
        try (Plays plays = new Plays(Runtime.getRuntime().availableProcessors())) {
            forecast = plays.play(new Series(drill, FIRST_SEED, PLAYS, transport), play -> {});
        }
        List<Map<String, Double>> rehearsed = new ArrayList<>();
        for (int i = 0; i < REHEARSALS; i++) {
            rehearsed.add(rehearse(name, FIRST_LIVE_SEED + i));
        }
        int before = compared;
        int insideBefore = inside;
        for (int figure = 0; figure < forecast.figures().size(); figure++) {
            compare(name, forecast.figures().get(figure), forecast.spread(figure), rehearsed);
        }
        say("%-22s %d of %d inside", name, inside - insideBefore, compared - before);
    }

    private static double rate(Drill drill) {
        return drill.traffic().stream()
                .flatMap(each -> each.steps().stream())
                .mapToDouble(step -> step.perSecond())
                .sum();
    }

    private void compare(String drill, Figure figure, Spread spread, List<Map<String, Double>> rehearsed) {
        if (spread.constant() || spread.undefined() > 0) {
            return;
        }
        StringBuilder live = new StringBuilder();
        int held = 0;
        for (Map<String, Double> run : rehearsed) {
            double value = run.getOrDefault(figure.text(), Double.NaN);
            boolean in = value >= spread.low95() && value <= spread.high95();
            held += in ? 1 : 0;
            live.append(live.isEmpty() ? "" : ", ")
                    .append(in ? words(figure, value) : "**" + words(figure, value) + "**");
        }
        compared += REHEARSALS;
        inside += held;
        String line = "| %s | %s | %s | %s to %s | %s |"
                .formatted(
                        drill,
                        figure.text(),
                        words(figure, spread.median()),
                        words(figure, spread.low95()),
                        words(figure, spread.high95()),
                        live);
        lines.add(line);
        if (held < REHEARSALS) {
            misses.add(line);
        }
    }

    private static String words(Figure figure, double value) {
        return Double.isNaN(value) ? "none" : Wording.value(figure.unit(), value);
    }

    /** One rehearsal through the command, as a person would; values by the measure's words, in the forecast's units. */
    private Map<String, Double> rehearse(String name, long seed) throws IOException, InterruptedException {
        Path run = work.resolve(name + "-" + seed);
        Process process = new ProcessBuilder(
                        launcher.toString(),
                        "rehearse",
                        name,
                        "--plain",
                        "--seed",
                        Long.toString(seed),
                        "--out",
                        run.toString())
                .redirectErrorStream(true)
                .redirectOutput(work.resolve("output.txt").toFile())
                .start();
        int status = process.waitFor();
        if (status > 1) {
            throw new IOException("rehearsal of " + name + " ended with " + status + ": "
                    + Files.readString(work.resolve("output.txt")));
        }
        JsonNode json = new ObjectMapper().readTree(run.resolve("run.json").toFile());
        Map<String, Double> values = new HashMap<>();
        for (String list : List.of("measures", "expectations")) {
            for (JsonNode each : json.get(list)) {
                JsonNode value = each.get("value");
                boolean duration =
                        each.get("unit").asText().equals(Unit.DURATION.name().toLowerCase(Locale.ROOT));
                values.put(
                        each.get("text").asText(),
                        value == null || value.isNull() ? Double.NaN : value.asDouble() * (duration ? 1e9 : 1));
            }
        }
        return values;
    }

    private void write(Path table) throws IOException {
        List<String> text = new ArrayList<>();
        text.add("# Forecast beside rehearsal");
        text.add("");
        text.add(String.format(
                Locale.ROOT,
                "%d of %d values of %d rehearsals a drill lie in the 95 %% band of a forecast of %d plays (%.1f %%). "
                        + "A hop took %.0f us, measured before. Values outside are bold.",
                inside,
                compared,
                REHEARSALS,
                PLAYS,
                100.0 * inside / compared,
                transport.hopNanos() / 1e3));
        text.add("");
        text.add("| drill | measure | median | 95 % band | rehearsals |");
        text.add("|---|---|---:|---:|---|");
        text.addAll(lines);
        Files.write(table, text);
        misses.forEach(Trust::sayLine);
    }

    private static void sayLine(String line) {
        System.out.println(line);
    }

    private static void say(String format, Object... values) {
        sayLine(String.format(Locale.ROOT, format, values));
    }
}
