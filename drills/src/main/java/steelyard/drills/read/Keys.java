package steelyard.drills.read;

import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;
import steelyard.drills.model.Cue;

/** Every map that a drill may hold, with every key that it knows; the JSON Schema lists the same ones. */
enum Keys {
    DRILL("a drill", "drill: Lose one of three", "drill", "about", "stage", "traffic", "lasts", "cues", "expect"),
    STAGE("a stage", "{pools: {seats: ...}}", "loops", "connections", "hosts", "pools"),
    HOST("a host", "{weight: 10, zone: north}", "weight", "zone"),
    POOL(
            "a pool",
            "{method: round-robin, backends: ...}",
            "method",
            "count",
            "weights",
            "probe",
            "warm-up",
            "drain",
            "retry",
            "timeouts",
            "forwarded",
            "front",
            "serves",
            "backends"),
    PROBE("a probe", "{path: /afloat, every: 1s}", "kind", "path", "every", "within", "misses", "passes"),
    WARM_UP("a warm-up", "{ramp: 5s, floor: 10%}", "ramp", "floor"),
    DRAIN("a drain", "{limit: 10s}", "limit"),
    RETRY("a retry", "{at-most: 1, budget: 40%}", "at-most", "budget", "bucket", "also"),
    TIMEOUTS("timeouts", "{connect: 1s}", "connect", "first-byte", "idle"),
    FRONT("a front", "{port: 18080}", "port"),
    BACKEND("a backend", "{weight: 1}", "weight", "host", "starts", "times", "serves"),
    SERVES(
            "serves",
            "{workers: 8, time: 12ms}",
            "workers",
            "queue",
            "time",
            "body",
            "probe-work",
            "probe-loss",
            "answers"),
    TIME("a time", "{exponential: 20ms}", "fixed", "exponential", "lognormal"),
    LOGNORMAL("lognormal", "{median: 12ms, 99%: 60ms}", "median", "99%"),
    TRAFFIC(
            "traffic",
            "{to: seats, rate: 300/s}",
            "to",
            "arrivals",
            "rate",
            "steps",
            "clients",
            "skew",
            "give-up",
            "requests"),
    STEP("a step", "{for: 20s, rate: 300/s}", "for", "rate"),
    REQUEST(
            "a request",
            "{get: /sailings/today, share: 80%}",
            "get",
            "head",
            "post",
            "put",
            "delete",
            "patch",
            "options",
            "share",
            "body",
            "good"),
    CUE("a cue", "{at: 15s, kill: fulmar}", cueKeys()),
    TARGET("a target", "{host: north-quay}", "host", "zone", "pool"),
    EXPECTATION(
            "an expectation",
            "{measure: failed, at-most: 1%}",
            "measure",
            "of",
            "from",
            "to",
            "after",
            "quantile",
            "cause",
            "worst",
            "until",
            "shown",
            "share",
            "at-most",
            "at-least",
            "between");

    private final String noun;
    private final String example;
    private final List<String> words;

    Keys(String noun, String example, String... words) {
        this.noun = noun;
        this.example = example;
        this.words = List.of(words);
    }

    /** What such a map describes, with its article. */
    String noun() {
        return noun;
    }

    /** How such a map may look. */
    String example() {
        return example;
    }

    List<String> words() {
        return words;
    }

    private static String[] cueKeys() {
        List<String> keys = new ArrayList<>(List.of("at", "as", "for", "times", "every"));
        keys.addAll(List.of("factor", "plus", "probes", "share", "status", "when", "period", "weight", "limit"));
        Stream.of(Cue.Kind.values()).map(Cue.Kind::word).forEach(keys::add);
        return keys.toArray(String[]::new);
    }
}
