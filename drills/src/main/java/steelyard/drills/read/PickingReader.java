package steelyard.drills.read;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Affinity;
import steelyard.drills.model.Delay;
import steelyard.drills.model.Hashing;
import steelyard.drills.model.Picking;
import steelyard.drills.model.Pool;

/** Reads how a pool picks. What does not go together is noted, and something harmless stands in. */
final class PickingReader {
    static final Quantity<Pool.Method> METHOD = Words.of("a method", Pool.Method.values());
    private static final Quantity<Pool.Count> COUNT = Words.of("a unit to count", Pool.Count.values());
    private static final Quantity<Pool.Weights> WEIGHTS = Words.of("an owner of weights", Pool.Weights.values());
    private static final Quantity<Delay.Candidates> CANDIDATES =
            Words.of("a choice of candidates", Delay.Candidates.values());
    private static final Quantity<Affinity.By> AFFINITY = Words.of("a kind of affinity", Affinity.By.values());

    private final Problems problems;
    private final HashReader hashes;

    PickingReader(Problems problems) {
        this.problems = problems;
        this.hashes = new HashReader(problems);
    }

    Picking read(Fields pool) {
        Pool.Method method = pool.need("method", METHOD, Pool.Method.WEIGHTED_ROUND_ROBIN);
        Pool.Weights weights = pool.read("weights", WEIGHTS, Pool.Weights.BACKEND);
        return new Picking(
                method,
                pool.read("count", COUNT, Pool.Count.REQUESTS),
                checked(pool, method, weights),
                hash(pool, method),
                delay(pool, method),
                affinity(pool, method));
    }

    private Pool.Weights checked(Fields pool, Pool.Method method, Pool.Weights weights) {
        if (weights == Pool.Weights.HOST && method != Pool.Method.WEIGHTED_ROUND_ROBIN) {
            problems.add(
                    pool.valuePlace("weights"),
                    "weights: host goes by turns, which " + method.word() + " does not take",
                    "write method: weighted-round-robin, or weights: backend");
            return Pool.Weights.BACKEND;
        }
        if (weights == Pool.Weights.LOAD && !method.weighs()) {
            problems.add(
                    pool.valuePlace("weights"),
                    "under " + method.word() + " weights play no part",
                    "write a method that weighs, such as weighted-round-robin, or weights: backend");
            return Pool.Weights.BACKEND;
        }
        if (weights == Pool.Weights.LOAD && !pool.has("load")) {
            pool.missing("load", "weights: load needs it; write load: {every: 1s, gauges: {cpu: 80%}}");
        }
        return weights;
    }

    private @Nullable Hashing hash(Fields pool, Pool.Method method) {
        if (method == Pool.Method.HASH) {
            if (!pool.has("hash")) {
                pool.missing("hash", "method: hash needs it; write hash: {by: client}");
                return Hashing.USUAL;
            }
            return hashes.read(pool.map("hash", Keys.HASH));
        }
        strange(pool, "hash", Pool.Method.HASH);
        return null;
    }

    private @Nullable Delay delay(Fields pool, Pool.Method method) {
        if (method == Pool.Method.EXPECTED_DELAY) {
            Fields fields = pool.map("delay", Keys.DELAY);
            return new Delay(
                    fields.read("candidates", CANDIDATES, Delay.USUAL.candidates()),
                    fields.read("memory", Durations.PERIOD, Delay.USUAL.memoryNanos()));
        }
        strange(pool, "delay", Pool.Method.EXPECTED_DELAY);
        return null;
    }

    /** A key that only one method knows; where the method could not be read nothing can be said. */
    private void strange(Fields pool, String key, Pool.Method of) {
        boolean known = pool.node("method") instanceof Node.Scalar word
                && METHOD.words().contains(word.text().strip());
        if (pool.has(key) && known) {
            problems.add(pool.keyPlace(key), key + " is of method: " + of.word(), "leave it out, or write that method");
        }
    }

    private @Nullable Affinity affinity(Fields pool, Pool.Method method) {
        Node node = pool.node("affinity");
        if (node == null) {
            return null;
        }
        if (node instanceof Node.Scalar) {
            Affinity.By by = pool.read("affinity", AFFINITY, Affinity.By.COOKIE);
            checkKey(pool, by, method);
            return by == Affinity.By.COOKIE ? Affinity.byCookie() : Affinity.byClient();
        }
        Fields fields = pool.map("affinity", Keys.AFFINITY);
        Affinity.By by = fields.need("by", AFFINITY, Affinity.By.COOKIE);
        checkKey(pool, by, method);
        if (by == Affinity.By.CLIENT && fields.has("cookie")) {
            problems.add(
                    fields.keyPlace("cookie"),
                    "affinity by client needs no cookie",
                    "leave it out, or write by: cookie");
        }
        String cookie = fields.read("cookie", Names.TOKEN, Affinity.USUAL_COOKIE);
        return new Affinity(
                by,
                by == Affinity.By.COOKIE ? cookie : null,
                fields.read("lasts", Durations.POSITIVE, Affinity.USUAL_LASTS_NANOS));
    }

    private void checkKey(Fields pool, Affinity.By by, Pool.Method method) {
        if (by == Affinity.By.CLIENT && method == Pool.Method.HASH) {
            problems.add(
                    pool.valuePlace("affinity"),
                    "affinity by client and method: hash both say where a client goes",
                    "leave affinity out, or write affinity: cookie");
        }
    }
}
