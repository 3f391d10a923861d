package steelyard.harness.report;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;

/** A run folder small enough to check by hand: two backends, ten slices, a cue at 0.4 s. */
final class TinyRun {
    static final String RUN = """
            {"format": 1, "drill": "Tiny", "about": "Two backends.", "stage": "live", "backends": "embedded", "seed": 7,
             "lasts": 1.0, "ended": "complete", "versions": {"steelyard": "0.1.0"},
             "cast": {"hosts": [{"name": "quay", "weight": 3, "zone": null}],
                      "pools": [{"name": "seats", "method": "round-robin", "count": "requests", "weights": "backend",
                                 "settings": {"probe": "none"}}],
                      "backends": [{"name": "fulmar", "pool": "seats", "host": "quay", "weight": 1},
                                   {"name": "gannet", "pool": "seats", "host": "quay", "weight": 1}]},
             "verdict": {"met": false, "fit": true, "text": "Not met: 1 of 1; worst: failed"},
             "expectations": [{"measure": "failed", "of": null, "text": "failed", "bound": "at most 1 %",
                               "measured": "5 %", "value": 0.05, "least": null, "most": 0.01, "unit": "share",
                               "margin": "-4 %", "met": false, "why": null}],
             "measures": [{"measure": "failed", "of": null, "text": "failed", "measured": "5 %", "why": null}],
             "checks": [{"check": "lateness of the generator", "ok": true, "text": "0.1 ms"}],
             "source": "drill: Tiny </script><script>alert(1)</script>"}
            """;

    private TinyRun() {}

    static Path write(Path folder) throws IOException {
        return write(folder, RUN);
    }

    static Path write(Path folder, String run) throws IOException {
        Files.writeString(folder.resolve("run.json"), run);
        Files.writeString(
                folder.resolve("machine.json"),
                "{\"started\": \"2020-02-02T02:02:02Z\", \"processors\": 2, \"memory\": 4294967296}");
        Files.writeString(folder.resolve("slices.csv"), slices());
        Files.writeString(
                folder.resolve("standing.csv"),
                "at,backend,from,to,cause,pickable\n0.650000,fulmar,up,down,misses,false\n");
        Files.writeString(
                folder.resolve("cues.csv"),
                "due,at,cue,action,by\n0.400000,0.400200,\"fulmar, \"\"the\"\" first, dies\",kill fulmar,drill\n");
        return folder;
    }

    /** Before the cue 10 requests a slice at 10 ms, shared evenly; from it 20 at 40 ms, fulmar's half refused. */
    private static String slices() {
        StringBuilder out = new StringBuilder("slice,from,offered,ok,failed,refused,reset,timed-out,no-backend,"
                + "bad-gateway,gateway-timeout,backend-error,cut,gave-up,p50_ms,p95_ms,p99_ms,worst_ms,retries");
        for (String name : new String[] {"fulmar", "gannet"}) {
            for (String column : "picked,in-flight,standing,weight,entitled,utilisation,waiting".split(",")) {
                out.append(',').append(name).append(':').append(column);
            }
        }
        for (int slice = 0; slice < 10; slice++) {
            boolean after = slice >= 4;
            out.append('\n').append(slice).append(",0.").append(slice).append("00000,");
            out.append(after ? "20,10,10,10,0,0,0,0,0,0,0,0" : "10,10,0,0,0,0,0,0,0,0,0,0");
            out.append(after ? ",40.000,41.000,42.000,43.000,0" : ",10.000,11.000,12.000,13.000,0");
            out.append(after ? ",10,0,up,1.0,0.5,0.0,0" : ",5,1,up,1.0,0.5,0.25,0");
            out.append(after ? ",10,2,up,1.0,0.5,0.75,1" : ",5,1,up,1.0,0.5,0.25,0");
        }
        return out.append('\n').toString();
    }
}
