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
            "hash",
            "delay",
            "affinity",
            "probe",
            "warm-up",
            "bench",
            "load",
            "last-resort",
            "standby",
            "in-flight",
            "drain",
            "retry",
            "timeouts",
            "limits",
            "forwarded",
            "front",
            "backend-tls",
            "serves",
            "backends"),
    HASH("a hash", "{by: path, table: ring}", "by", "table", "points", "size", "bound"),
    HASH_BY("what is hashed", "{header: x-berth}", "header", "cookie"),
    DELAY("a delay", "{candidates: two, memory: 10s}", "candidates", "memory"),
    AFFINITY("an affinity", "{by: cookie, lasts: 30m}", "by", "cookie", "lasts"),
    PROBE("a probe", "{path: /afloat, every: 1s}", "kind", "path", "every", "within", "misses", "passes", "jitter"),
    WARM_UP("a warm-up", "{ramp: 5s, floor: 10%}", "ramp", "floor"),
    BENCH("a bench", "{after: 5, time: 5s}", "after", "share", "over", "least", "time", "most", "quiet", "cap"),
    LOAD(
            "a load",
            "{every: 1s, gauges: {cpu: 80%}}",
            "path",
            "every",
            "within",
            "stale-after",
            "floor",
            "cost",
            "gauges"),
    LOAD_GAUGE("a gauge that counts", "{ceiling: 80%, gain: 2}", "ceiling", "gain"),
    IN_FLIGHT("an in-flight", "{most: 16, waiting: 100}", "most", "waiting", "wait"),
    DRAIN("a drain", "{limit: 10s}", "limit", "keep-clients"),
    RETRY("a retry", "{at-most: 1, budget: 40%}", "at-most", "budget", "bucket", "also"),
    TIMEOUTS("timeouts", "{connect: 1s}", "connect", "first-byte", "idle", "head", "body"),
    LIMITS("limits", "{target: 8KiB, head: 64KiB, body: 1MiB}", "target", "head", "body"),
    FRONT("a front", "{port: 18080}", "port", "kind", "tls"),
    TLS("a tls", "{certificate: front.pem, key: front-key.pem}", "certificate", "key", "store", "password-from"),
    BACKEND("a backend", "{weight: 1}", "weight", "host", "starts", "tier", "times", "serves"),
    SERVES(
            "serves",
            "{workers: 8, time: 12ms}",
            "workers",
            "queue",
            "time",
            "body",
            "probe-work",
            "probe-loss",
            "answers",
            "cold",
            "gauges"),
    COLD("a cold start", "{factor: 3, decay: 5s}", "factor", "decay"),
    GAUGE("a gauge", "{base: 30%, each: 0.5%}", "base", "each"),
    TIME("a time", "{exponential: 20ms}", "fixed", "exponential", "lognormal", "gamma", "trace", "column", "order"),
    GAMMA("gamma", "{mean: 12ms, shape: 2}", "mean", "shape"),
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
            "good",
            "headers",
            "upgrade",
            "open"),
    CUE("a cue", "{at: 15s, kill: fulmar}", cueKeys()),
    PROBE_CHANGE("a change of probes", "{every: 500ms}", "every", "within", "misses", "passes", "jitter"),
    DRAIN_CHANGE("a change of drains", "{limit: 10s}", "limit"),
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
        keys.addAll(List.of("gauge", "to", "probe", "method"));
        Stream.of(Cue.Kind.values()).map(Cue.Kind::word).forEach(keys::add);
        return keys.toArray(String[]::new);
    }
}
