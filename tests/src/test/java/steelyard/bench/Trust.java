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
import java.util.TreeMap;
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
    /** The lines of the table, by drill. */
    private final Map<String, List<String>> lines = new TreeMap<>();

    private Trust(Path launcher, Path work, Transport transport) {
        this.launcher = launcher;
        this.work = work;
        this.transport = transport;
    }

    /** Takes the file for the table, the launcher, and, to redo these alone in a table that is there, names of drills. */
    public static void main(String[] args) throws Exception {
        Path table = Path.of(args[0]);
        Transport transport = MeasuredTransport.now();
        say("a hop takes %.0f us here", transport.hopNanos() / 1e3);
        Trust trust = new Trust(Path.of(args[1]), Files.createTempDirectory("trust"), transport);
        List<String> names = List.of(args).subList(2, args.length);
        if (!names.isEmpty()) {
            trust.keep(table);
        }
        for (String name : names.isEmpty() ? DrillLibrary.names() : names) {
            trust.compare(name);
        }
        List<String> all = trust.lines.values().stream().flatMap(List::stream).toList();
        trust.write(table, all);
        all.stream().filter(line -> line.contains("**")).forEach(Trust::sayLine);
        say("inside-band: %.3f", (double) inside(all) / compared(all));
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
        lines.put(name, new ArrayList<>());
        for (int figure = 0; figure < forecast.figures().size(); figure++) {
            compare(name, forecast.figures().get(figure), forecast.spread(figure), rehearsed);
        }
        say("%-22s %d of %d inside", name, inside(lines.get(name)), compared(lines.get(name)));
    }

    /** The lines of an earlier table; those of drills that are compared anew are replaced. */
    private void keep(Path table) throws IOException {
        for (String line : Files.readAllLines(table)) {
            String drill = line.startsWith("| ") ? line.split(" \\| ")[0].substring(2) : "";
            if (DrillLibrary.names().contains(drill)) {
                lines.computeIfAbsent(drill, d -> new ArrayList<>()).add(line);
            }
        }
    }

    private static int compared(List<String> of) {
        return of.size() * REHEARSALS;
    }

    /** Values outside stand between two pairs of stars. */
    private static int inside(List<String> of) {
        int stars = of.stream()
                .mapToInt(line -> line.split("\\*\\*", -1).length - 1)
                .sum();
        return compared(of) - stars / 2;
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
        for (Map<String, Double> run : rehearsed) {
            double value = run.getOrDefault(figure.text(), Double.NaN);
            boolean in = value >= spread.low95() && value <= spread.high95();
            live.append(live.isEmpty() ? "" : ", ")
                    .append(in ? words(figure, value) : "**" + words(figure, value) + "**");
        }
        String line = "| %s | %s | %s | %s to %s | %s |"
                .formatted(
                        drill,
                        figure.text(),
                        words(figure, spread.median()),
                        words(figure, spread.low95()),
                        words(figure, spread.high95()),
                        live);
        lines.get(drill).add(line);
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

    private void write(Path table, List<String> all) throws IOException {
        List<String> text = new ArrayList<>();
        text.add("# Forecast beside rehearsal");
        text.add("");
        text.add(String.format(
                Locale.ROOT,
                "%d of %d values of %d rehearsals a drill lie in the 95 %% band of a forecast of %d plays (%.1f %%). "
                        + "A hop took %.0f us, measured before. Values outside are bold.",
                inside(all),
                compared(all),
                REHEARSALS,
                PLAYS,
                100.0 * inside(all) / compared(all),
                transport.hopNanos() / 1e3));
        text.add("");
        text.add("| drill | measure | median | 95 % band | rehearsals |");
        text.add("|---|---|---:|---:|---|");
        text.addAll(all);
        Files.write(table, text);
    }

    private static void sayLine(String line) {
        System.out.println(line);
    }

    private static void say(String format, Object... values) {
        sayLine(String.format(Locale.ROOT, format, values));
    }
}
