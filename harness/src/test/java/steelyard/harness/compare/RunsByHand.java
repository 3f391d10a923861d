package steelyard.harness.compare;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Locale;

/** Run folders written by hand. */
final class RunsByHand {
    static final String DRILL = """
            drill: By hand
            stage:
              pools:
                seats:
                  probe: {every: 1s, misses: 3}
                  backends: {fulmar: , gannet: }
            traffic:
              - {to: seats, rate: 300/s}
            lasts: 1s
            cues:
              - {at: 1s, kill: fulmar, as: fulmar dies}
              - {at: 2s, revive: fulmar, as: fulmar returns}
            expect:
              - {measure: failed, at-most: 10%}
            """;

    /** The same with all that a reader asks for. */
    static final String WHOLE = """
            drill: By hand
            about: Two backends, and a title with a comma.
            stage:
              pools:
                seats:
                  method: round-robin
                  probe: {path: /afloat, every: 1s, misses: 3}
                  serves: {workers: 8, time: {lognormal: {median: 12ms, 99%: 60ms}}}
                  backends: {fulmar: , gannet: }
            traffic:
              - {to: seats, rate: 300/s}
            lasts: 3s
            cues:
              - {at: 1s, kill: fulmar, as: fulmar dies}
            expect:
              - {measure: failed, from: fulmar dies + 100ms, at-most: 10%}
            """;

    private final Path folder;

    RunsByHand(Path folder) {
        this.folder = folder;
    }

    /** What the runs of a test differ in. */
    record Rehearsal(int seed, int failed, double p99, String source, String verdict, String ended) {
        static Rehearsal of(int seed, int failed, double p99) {
            return new Rehearsal(
                    seed, failed, p99, DRILL, "{\"met\": true, \"fit\": true, \"text\": \"Met.\"}", "complete");
        }

        Rehearsal from(String other) {
            return new Rehearsal(seed, failed, p99, other, verdict, ended);
        }

        Rehearsal judged(String other) {
            return new Rehearsal(seed, failed, p99, source, other, ended);
        }

        Rehearsal ended(String other) {
            return new Rehearsal(seed, failed, p99, source, verdict, other);
        }
    }

    /** A rehearsal of ten slices of 100 requests, of which some in the first failed. */
    Path rehearsal(String name, Rehearsal run) throws IOException {
        String share = String.format(Locale.ROOT, "%.6f", run.failed / 1000.0);
        Path path = Files.createDirectories(folder.resolve(name));
        Files.writeString(path.resolve("run.json"), json(run, share, ""));
        StringBuilder slices = new StringBuilder("slice,from,offered,ok,failed,fulmar:picked,gannet:picked\n");
        for (int slice = 0; slice < 10; slice++) {
            int failed = slice == 0 ? run.failed : 0;
            slices.append(slice + ",0." + slice + ",100," + (100 - failed) + "," + failed + ",50,50\n");
        }
        Files.writeString(path.resolve("slices.csv"), slices);
        return path;
    }

    /** A forecast whose plays failed in those shares; NaN is written as a word. */
    Path forecast(String name, int seed, double... failed) throws IOException {
        Path path = Files.createDirectories(folder.resolve(name));
        Rehearsal run = Rehearsal.of(seed, 0, 0.05);
        String forecast = "\"forecast\": {\"plays\": " + failed.length + ", \"wanted\": " + failed.length + "},";
        Files.writeString(path.resolve("run.json"), json(run, "0.01", forecast).replace("\"live\"", "\"virtual\""));
        StringBuilder plays =
                new StringBuilder("play,seed,fit,\"failed, whole play: at most 10 %\",\"failed, whole play\","
                        + "\"latency 99 %, whole play\",\"share of fulmar, whole play\"\n");
        for (int play = 0; play < failed.length; play++) {
            String value = Double.isNaN(failed[play]) ? "never" : String.valueOf(failed[play]);
            plays.append(play + "," + (seed + play) + ",true," + value + "," + value + ",0.05,0.5\n");
        }
        Files.writeString(path.resolve("plays.csv"), plays);
        return path;
    }

    private static String json(Rehearsal run, String share, String more) {
        return String.format(
                Locale.ROOT,
                """
                {"format": 1, "drill": "By hand", "about": "", "stage": "live", "backends": "embedded", "seed": %d,
                 "lasts": 1.0, "ended": "%s", "versions": {"steelyard": "0.1.0"}, %s
                 "cast": {"hosts": [], "pools": [], "backends": [
                    {"name": "fulmar", "pool": "seats", "host": "fulmar", "weight": 1},
                    {"name": "gannet", "pool": "seats", "host": "gannet", "weight": 1}]},
                 "verdict": %s,
                 "expectations": [{"measure": "failed", "of": null, "text": "failed, whole play", "bound": "at most 10 %%",
                    "measured": "x", "value": %s, "least": null, "most": 0.1, "unit": "share", "met": true, "why": null}],
                 "measures": [
                    {"measure": "failed", "text": "failed, whole play", "measured": "x", "value": %s, "unit": "share"},
                    {"measure": "latency", "text": "latency 99 %%, whole play", "measured": "x", "value": %.6f,
                     "unit": "duration"},
                    {"measure": "share", "of": "fulmar", "text": "share of fulmar, whole play", "measured": "50 %%",
                     "value": 0.5, "unit": "share"}],
                 "checks": [], "source": "%s"}
                """,
                run.seed,
                run.ended,
                more,
                run.verdict,
                share,
                share,
                run.p99,
                run.source.replace("\n", "\\n"));
    }
}
