package steelyard.drills.read;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Retune;

/** Reads what a retune changes. */
final class RetuneReader {
    private final Problems problems;

    RetuneReader(Problems problems) {
        this.problems = problems;
    }

    /** The change; null when there is none, which is noted. */
    @Nullable
    Retune read(Fields cue) {
        boolean any = cue.has("probe") || cue.has("drain") || cue.has("method");
        if (!any) {
            if (!cue.odd()) {
                problems.add(cue.place(), "the retune changes nothing", "write probe, drain or method");
            }
            return null;
        }
        Retune.ProbeChange probe =
                cue.has("probe") ? new ProbeReader(problems).change(cue.map("probe", Keys.PROBE_CHANGE)) : null;
        Long limit =
                cue.has("drain") ? cue.map("drain", Keys.DRAIN_CHANGE).need("limit", Durations.POSITIVE, 1L) : null;
        Pool.Method method = cue.read("method", PickingReader.METHOD);
        return probe == null && limit == null && method == null ? null : new Retune(probe, limit, method);
    }

    /** Notes what of a change the pool cannot take. */
    void check(Retune change, Pool pool, Place place) {
        Retune.ProbeChange probe = change.probe();
        if (probe != null && pool.probe() == null) {
            refuse(place, pool, "has no probe to change", "write probe: {path: /afloat} for the pool");
        }
        Pool.Method method = change.method();
        if (method == Pool.Method.HASH && pool.picking().hash() == null) {
            refuse(place, pool, "has no hash to go by", "begin with method: hash, or change to another method");
        }
        if (method != null && method != Pool.Method.WEIGHTED_ROUND_ROBIN && pool.weights() == Pool.Weights.HOST) {
            refuse(
                    place,
                    pool,
                    "weighs by host, by turns which " + method.word() + " does not take",
                    "write weights: backend for the pool");
        }
        if (method != null && !method.weighs() && pool.weights() == Pool.Weights.LOAD) {
            refuse(
                    place,
                    pool,
                    "weighs by load, and under " + method.word() + " weights play no part",
                    "write weights: backend for the pool, or change to a method that weighs");
        }
    }

    private void refuse(Place place, Pool pool, String why, String remedy) {
        problems.add(place, "pool '" + pool.name() + "' " + why, remedy);
    }
}
