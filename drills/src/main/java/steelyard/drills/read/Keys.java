package steelyard.drills.read;

import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;
import steelyard.drills.model.Cue;

/** Every map that a drill may hold, with every key that it knows; the JSON Schema lists the same ones. */
enum Keys {
    DRILL("a drill", "drill", "about", "stage", "traffic", "lasts", "cues", "expect"),
    STAGE("a stage", "loops", "hosts", "pools"),
    HOST("a host", "weight", "zone"),
    POOL(
            "a pool",
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
    PROBE("a probe", "kind", "path", "every", "within", "misses", "passes"),
    WARM_UP("a warm-up", "ramp", "floor"),
    DRAIN("a drain", "limit"),
    RETRY("a retry", "at-most", "budget", "bucket", "also"),
    TIMEOUTS("timeouts", "connect", "first-byte", "idle"),
    FRONT("a front", "port"),
    BACKEND("a backend", "weight", "host", "starts", "times", "serves"),
    SERVES("serves", "workers", "queue", "time", "body", "probe-work", "answers"),
    TIME("a time", "fixed", "exponential", "lognormal"),
    LOGNORMAL("lognormal", "median", "99%"),
    TRAFFIC("traffic", "to", "arrivals", "rate", "steps", "clients", "skew", "give-up", "requests"),
    STEP("a step", "for", "rate"),
    REQUEST("a request", "get", "head", "post", "put", "delete", "patch", "options", "share", "body", "good"),
    CUE("a cue", cueKeys()),
    TARGET("a target", "host", "zone", "pool"),
    EXPECTATION(
            "an expectation",
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
    private final List<String> words;

    Keys(String noun, String... words) {
        this.noun = noun;
        this.words = List.of(words);
    }

    /** What such a map describes, with its article. */
    String noun() {
        return noun;
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
