package steelyard.drills.read;

import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Affinity;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Bench;
import steelyard.drills.model.Front;
import steelyard.drills.model.Hashing;
import steelyard.drills.model.Health;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Picking;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Reserve;
import steelyard.drills.model.Retry;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Wire;

/** Looks for parts of one pool that do not go together, or of which one plays no part. */
final class PoolChecks {
    private static final long MOST_POINTS = 5_000_000;
    /** What decimal fractions lose in binary must not decide. */
    private static final double SLACK = 1e-9;

    private final Problems problems;
    private final Fields pool;
    private final BackendsReader.OfPool ofPool;

    PoolChecks(Problems problems, Fields pool, BackendsReader.OfPool ofPool) {
        this.problems = problems;
        this.pool = pool;
        this.ofPool = ofPool;
    }

    void weights(String name, Picking picking, UnusedWeights unused) {
        Place written = ofPool.firstWeight();
        Pool.Method method = picking.method();
        if (!method.weighs()) {
            if (written != null && ofPool.weightsDiffer()) {
                unused.found(name, method, written);
            }
        } else if (written != null && ofPool.noneWeighs()) {
            problems.notice(
                    written,
                    "every backend of the pool has weight 0, so none takes work",
                    "give one a weight of at least 1");
        }
    }

    void hash(Picking picking) {
        Hashing hash = picking.hash();
        if (hash == null || !pool.has("hash")) {
            return;
        }
        int members = ofPool.backends().size();
        if (hash.table() == Hashing.Table.PERMUTATION && hash.size() <= members) {
            problems.add(
                    pool.valuePlace("hash"),
                    "a table of " + hash.size() + " places is too small for " + members + " backends",
                    "write a larger prime for size, such as 65537");
        }
        long weight = ofPool.backends().stream().mapToLong(Backend::weight).sum();
        if (hash.table() == Hashing.Table.RING && weight * hash.points() > MOST_POINTS) {
            problems.add(
                    pool.valuePlace("hash"),
                    "the ring would hold " + weight * hash.points() + " points",
                    "write fewer points or smaller weights: at most " + MOST_POINTS + " points in all");
        }
    }

    void probes(@Nullable Probe probe) {
        boolean loses =
                ofPool.backends().stream().anyMatch(each -> each.serves().probeLoss() > 0);
        if (loses && (probe == null || probe.kind() == Probe.Kind.TCP)) {
            problems.notice(
                    probe == null ? pool.place() : pool.valuePlace("probe"),
                    "probe-loss plays no part, since "
                            + (probe == null ? "nothing probes" : "a tcp probe only connects"),
                    "write probe: {path: /afloat} for the pool");
        }
    }

    /** A cap is rounded down to whole backends, so that in a small pool it can leave none. */
    void bench(@Nullable Bench bench) {
        int members = ofPool.backends().size();
        if (bench != null && members > 0 && bench.cap() * members < 1 - SLACK) {
            problems.notice(
                    pool.valuePlace("bench"),
                    "none is ever benched, since cap is less than one of the pool's " + members
                            + (members == 1 ? " backend" : " backends"),
                    "write a larger cap, at least " + (100 + members - 1) / members + "%");
        }
    }

    void readings(Picking picking, Health health) {
        LoadProbe load = health.load();
        if (load == null || !pool.has("load")) {
            return;
        }
        if (picking.weights() != Pool.Weights.LOAD) {
            problems.notice(
                    pool.keyPlace("load"), "load is not read, since no weight comes from it", "write weights: load");
        }
        Probe probe = health.probe();
        if (probe != null && load.path().equals(probe.path())) {
            problems.add(
                    pool.valuePlace("load"),
                    "readings and probes ask for one path, '" + load.path() + "'",
                    "write another path for one of them");
        }
        load.gauges().forEach(gauge -> shown(gauge.name()));
    }

    /** Every backend has to show a gauge that counts. */
    private void shown(String gauge) {
        for (Backend backend : ofPool.backends()) {
            List<String> names =
                    backend.serves().gauges().stream().map(Serves.Gauge::name).toList();
            if (!gauge.equals(Serves.CPU) && Names.fitsGauge(gauge) && !names.contains(gauge)) {
                problems.add(
                        pool.valuePlace("load"),
                        "backend '" + backend.name() + "' shows no gauge '" + gauge + "'",
                        "write gauges: {" + gauge + ": 30%} in what it serves, or count another gauge");
                return;
            }
        }
    }

    /** Whether standby and tiers go together. */
    boolean tiers(Reserve reserve) {
        List<Integer> tiers =
                ofPool.backends().stream().map(Backend::tier).distinct().toList();
        boolean needed = tiers.contains(2);
        if (needed && reserve.standby() == 0) {
            if (!pool.has("standby")) {
                pool.missing("standby", "a backend has tier 2; write standby: 50%");
            }
            return false;
        }
        if (!needed && reserve.standby() > 0 && !tiers.isEmpty()) {
            problems.add(pool.keyPlace("standby"), "no backend of the pool stands by", "write tier: 2 for one");
            return false;
        }
        if (needed && !tiers.contains(1)) {
            problems.add(pool.valuePlace("backends"), "every backend of the pool stands by", "write tier: 1 for one");
        }
        return true;
    }

    /** Whether a front can do what the pool asks of it. */
    boolean front(Picking picking, @Nullable Retry retry, Wire wire) {
        if (wire.front().kind() == Front.Kind.HTTP) {
            return true;
        }
        boolean whole = retry == null;
        if (picking.count() != Pool.Count.CONNECTIONS) {
            whole = false;
            refuse(pool.has("count") ? "count" : "front", "spreads connections", "write count: connections");
        }
        if (pool.has("retry")) {
            refuse("retry", "cannot make a request again", "leave retry out");
        }
        Affinity affinity = picking.affinity();
        if (affinity != null && affinity.by() == Affinity.By.COOKIE) {
            refuse("affinity", "sees no cookie", "write affinity: client");
        }
        Hashing hash = picking.hash();
        if (hash != null && hash.by() != Hashing.By.CLIENT) {
            refuse("hash", "sees no " + hash.by().word(), "write by: client");
        }
        if (pool.has("forwarded")) {
            refuse("forwarded", "adds no field", "leave forwarded out");
        }
        if (pool.has("limits")) {
            refuse("limits", "sees no request", "leave limits out");
        }
        return whole;
    }

    private void refuse(String key, String why, String remedy) {
        problems.add(pool.keyPlace(key), "a tcp front passes octets on and " + why, remedy);
    }
}
