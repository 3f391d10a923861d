package steelyard.drills.read;

import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.function.Supplier;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Drain;
import steelyard.drills.model.Forwarded;
import steelyard.drills.model.Front;
import steelyard.drills.model.Health;
import steelyard.drills.model.Picking;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Retry;
import steelyard.drills.model.Timeouts;
import steelyard.drills.model.WarmUp;
import steelyard.drills.model.Wire;

/** Reads one pool. */
final class PoolReader {
    private static final long SECOND = Durations.SECOND;
    private static final long MILLISECOND = SECOND / 1_000;
    private static final Quantity<Pool.Method> METHOD = Words.of("a method", Pool.Method.values());
    private static final Quantity<Pool.Count> COUNT = Words.of("a unit to count", Pool.Count.values());
    private static final Quantity<Pool.Weights> WEIGHTS = Words.of("an owner of weights", Pool.Weights.values());
    private static final Quantity<Probe.Kind> PROBE_KIND = Words.of("a kind of probe", Probe.Kind.values());
    private static final Quantity<Integer> IN_A_ROW = Numbers.from(1, 1_000);
    private static final Quantity<Double> FLOOR =
            Shares.SHARE.that(s -> s >= 0.001 && s <= 1, "is out of range", "write a share from 0.1% to 100%");
    private static final Quantity<Integer> PORT = Numbers.from(1, 65_535);
    private static final Quantity<Integer> RETRIES = Numbers.from(1, 100);
    private static final Quantity<Integer> BUCKET = Numbers.from(1, 1_000_000);

    static final Quantity<String> PATH = Quantity.of("a path", "/sailings/today", text -> text)
            .that(PoolReader::fitsRequestLine, "is not a path", "begin with a slash, and write no space");

    private static final Probe PROBE = new Probe(Probe.Kind.TCP, null, SECOND, SECOND, 1, 1);
    private static final WarmUp WARM_UP = new WarmUp(SECOND, 1);
    private static final Retry RETRY = new Retry(1, 1, 1, Set.of());

    private final Problems problems;
    private final BackendsReader backends;
    private final Map<Integer, String> ports = new HashMap<>();

    PoolReader(Problems problems, BackendsReader backends) {
        this.problems = problems;
        this.backends = backends;
    }

    /** The pool, or null when it has no backend. */
    @Nullable
    Pool read(Node.Entry entry) {
        Fields fields = Fields.open(entry.value(), Keys.POOL, problems);
        Pool.Method method = fields.need("method", METHOD, Pool.Method.WEIGHTED_ROUND_ROBIN);
        Pool.Weights weights = fields.read("weights", WEIGHTS, Pool.Weights.BACKEND);
        Pool.Count count = fields.read("count", COUNT, Pool.Count.REQUESTS);
        Probe probe = read(fields, "probe", PROBE, () -> probe(fields.map("probe", Keys.PROBE)));
        WarmUp warmUp = read(fields, "warm-up", WARM_UP, () -> warmUp(fields));
        Retry retry = read(fields, "retry", RETRY, () -> retry(fields.map("retry", Keys.RETRY)));
        long drain = fields.map("drain", Keys.DRAIN).read("limit", Durations.POSITIVE, 30 * SECOND);
        Timeouts timeouts = timeouts(fields.map("timeouts", Keys.TIMEOUTS));
        boolean forwarded = fields.read("forwarded", Numbers.YES_OR_NO, false);
        int port = port(fields.map("front", Keys.FRONT), entry.key());
        BackendsReader.OfPool ofPool = backends.read(fields, entry.key());
        checkWeights(fields, method, weights, ofPool);
        checkLoss(fields, probe, ofPool);
        List<Backend> list = ofPool.backends();
        return list.isEmpty()
                ? null
                : Pool.with(entry.key(), Picking.by(method).with(count).with(weights))
                        .health(new Health(probe, warmUp, null, null))
                        .drain(new Drain(drain, false))
                        .retry(retry)
                        .timeouts(timeouts)
                        .wire(new Wire(
                                new Front(port, Front.Kind.HTTP, null),
                                forwarded ? Forwarded.ADDED : Forwarded.NOT_ADDED,
                                false))
                        .of(list);
    }

    private int port(Fields front, String pool) {
        int port = front.read("port", PORT, 0);
        String other = port == 0 ? null : ports.putIfAbsent(port, pool);
        if (other != null) {
            problems.add(
                    front.valuePlace("port"),
                    "port " + port + " is the front of pool '" + other + "' already",
                    "choose another one");
        }
        return port;
    }

    /**
     * What is behind a key that may be left out. Where a key of the pool could not be read it may be this one,
     * misspelt; something harmless then stands in, so that nobody is told that the pool lacks it.
     */
    private static <T> @Nullable T read(Fields pool, String key, T harmless, Supplier<T> reader) {
        return pool.has(key) ? reader.get() : pool.odd() ? harmless : null;
    }

    private Probe probe(Fields fields) {
        Probe.Kind kind = fields.read("kind", PROBE_KIND, Probe.Kind.HTTP);
        String path = null;
        if (kind == Probe.Kind.HTTP) {
            path = fields.need("path", PATH, "/");
        } else if (fields.has("path")) {
            problems.add(
                    fields.keyPlace("path"), "a tcp probe asks for no path", "leave out path, or write kind: http");
        }
        long every = fields.read("every", Durations.PERIOD, SECOND);
        long within = fields.read("within", Durations.POSITIVE, 400 * MILLISECOND);
        if (within > every) {
            problems.notice(
                    fields.keyPlace(fields.has("within") ? "within" : "every"),
                    "a probe may take " + Durations.text(within) + ", longer than from one to the next: a late answer"
                            + " delays the next probe",
                    "write a within of at most " + Durations.text(every));
        }
        return new Probe(
                kind, path, every, within, fields.read("misses", IN_A_ROW, 3), fields.read("passes", IN_A_ROW, 2));
    }

    private WarmUp warmUp(Fields pool) {
        if (pool.node("warm-up") instanceof Node.Scalar) {
            return new WarmUp(pool.read("warm-up", Durations.POSITIVE, SECOND), 0.1);
        }
        Fields fields = pool.map("warm-up", Keys.WARM_UP);
        return new WarmUp(fields.need("ramp", Durations.POSITIVE, SECOND), fields.read("floor", FLOOR, 0.1));
    }

    private static Retry retry(Fields fields) {
        return new Retry(
                fields.read("at-most", RETRIES, 1),
                fields.read("budget", Shares.SHARE, 0.4),
                fields.read("bucket", BUCKET, 10),
                Set.copyOf(fields.values("also", Numbers.STATUS)));
    }

    private static Timeouts timeouts(Fields fields) {
        return new Timeouts(
                fields.read("connect", Durations.POSITIVE, SECOND),
                fields.read("first-byte", Durations.POSITIVE, 10 * SECOND),
                fields.read("idle", Durations.POSITIVE, 60 * SECOND));
    }

    private void checkWeights(Fields fields, Pool.Method method, Pool.Weights weights, BackendsReader.OfPool ofPool) {
        Place written = ofPool.firstWeight();
        if (weights == Pool.Weights.HOST && method != Pool.Method.WEIGHTED_ROUND_ROBIN) {
            problems.add(
                    fields.valuePlace("weights"),
                    "weights: host goes by turns, which " + method.word() + " does not take",
                    "write method: weighted-round-robin, or weights: backend");
        }
        if (method == Pool.Method.ROUND_ROBIN) {
            if (written != null && ofPool.weightsDiffer()) {
                problems.notice(
                        written,
                        "under round-robin weights play no part",
                        "write method: weighted-round-robin to use them");
            }
        } else if (written != null && ofPool.noneWeighs()) {
            problems.notice(
                    written,
                    "every backend of the pool has weight 0, so none takes work",
                    "give one a weight of at least 1");
        }
    }

    private void checkLoss(Fields fields, @Nullable Probe probe, BackendsReader.OfPool ofPool) {
        boolean loses =
                ofPool.backends().stream().anyMatch(each -> each.serves().probeLoss() > 0);
        if (loses && (probe == null || probe.kind() == Probe.Kind.TCP)) {
            problems.notice(
                    probe == null ? fields.place() : fields.valuePlace("probe"),
                    "probe-loss plays no part, since "
                            + (probe == null ? "nothing probes" : "a tcp probe only connects"),
                    "write probe: {path: /afloat} for the pool");
        }
    }

    /** Whether a text can stand in a request line as it is: printable ASCII that begins with a slash. */
    private static boolean fitsRequestLine(String path) {
        return path.startsWith("/") && path.chars().allMatch(c -> c > ' ' && c < 0x7f && c != '#');
    }
}
