package steelyard.forecast;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Map;
import java.util.TreeMap;
import java.util.function.Consumer;
import java.util.stream.Stream;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.harness.forecast.Forecast;
import steelyard.harness.forecast.ForecastRecorder;
import steelyard.harness.forecast.Play;
import steelyard.harness.forecast.Played;
import steelyard.harness.forecast.Plays;
import steelyard.harness.forecast.Series;
import steelyard.harness.record.Machine;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.RunHead;
import steelyard.harness.report.Report;

/** A small drill, and forecasts of it. */
public final class Small {
    static final String TEXT = """
            drill: A small one
            about: Two backends, one dies and comes back.
            stage:
              pools:
                seats:
                  method: round-robin
                  probe: {path: /afloat, every: 500ms, within: 100ms, misses: 2, passes: 1}
                  retry: {at-most: 1, budget: 20%}
                  warm-up: 1s
                  serves: {workers: 4, queue: 16, time: {exponential: 8ms}}
                  backends:
                    fulmar: {weight: 1}
                    gannet: {weight: 1}
            traffic:
              - {to: seats, rate: 250/s, give-up: 2s, requests: [{get: /sailings, share: 70%}, {post: /holds, body: 64B, share: 30%}]}
            lasts: 8s
            cues:
              - {at: 2s, kill: fulmar, as: fulmar dies}
              - {at: 5s, revive: fulmar, as: fulmar returns}
            expect:
              - {measure: failed, at-most: 2%}
              - {measure: detected-in, of: fulmar, after: fulmar dies, between: [500ms, 1s]}
              - {measure: latency, quantile: 50%, at-most: 6ms}
            """;

    private Small() {}

    static Drill drill() {
        return read(TEXT);
    }

    public static Drill read(String text) {
        Parsed<Drill> parsed = DrillReader.read("drill", text);
        return parsed.value().orElseThrow(() -> new AssertionError(parsed.problems()));
    }

    /** Plays a series into a folder, as the command does. */
    public static Played record(Series series, int threads, Path folder) throws Exception {
        return record(series, threads, folder, (plays, play) -> {});
    }

    static Played record(Series series, int threads, Path folder, Watching watching) throws Exception {
        RunHead head = new RunHead(series.drill(), TEXT, "virtual", "virtual", series.seed(), "0.1.0");
        Machine machine = new Machine("2020-02-02T02:02:02Z", threads, 1, "os", "java", "none", null);
        try (ForecastRecorder recorder =
                        new ForecastRecorder(RunFolder.create(folder), head, series, Forecast.USUAL_HOLD, machine);
                Plays plays = new Plays(threads)) {
            Consumer<Play> each = play -> {
                recorder.played(play);
                watching.played(plays, play);
            };
            Played played = plays.play(series, recorder.bands(), each);
            recorder.finish(played.plays().isEmpty() ? null : Forecast.of(played, Forecast.USUAL_HOLD));
            Report.write(folder);
            return played;
        }
    }

    /** Told of each play. */
    interface Watching {
        void played(Plays plays, Play play);
    }

    /** The content of every file of a folder. */
    static Map<String, String> files(Path folder) throws IOException {
        Map<String, String> files = new TreeMap<>();
        try (Stream<Path> all = Files.list(folder)) {
            for (Path each : all.toList()) {
                files.put(each.getFileName().toString(), Files.readString(each));
            }
        }
        return files;
    }
}
