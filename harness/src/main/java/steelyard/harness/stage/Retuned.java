package steelyard.harness.stage;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Retune;
import steelyard.harness.record.Cast;

/**
 * The settings of pools as the retunes of one play have left them: a retune says only what changes, and the balancer is
 * told all of it. Not thread-safe.
 */
public final class Retuned {
    private final Cast cast;
    private final @Nullable Probe[] probes;

    public Retuned(Drill drill) {
        cast = new Cast(drill);
        probes = cast.pools().stream().map(Pool::probe).toArray(Probe[]::new);
    }

    /**
     * Has a pool retuned.
     *
     * @throws IllegalArgumentException for settings out of range; nothing changes then
     */
    public void apply(int pool, Retune retune, Hands hands) {
        Retune.ProbeChange change = retune.probe();
        Probe before = probes[pool];
        if (change != null && before != null) {
            Probe after = change.of(before);
            ProbeSettings settings = PoolTerms.probe(after);
            if (settings != null) {
                probes[pool] = after;
                hands.retune(pool, settings);
            }
        }
        Long limit = retune.drainLimitNanos();
        if (limit != null) {
            boolean keeps = cast.pools().get(pool).drain().keepClients();
            hands.retune(pool, new DrainSettings(limit, keeps));
        }
        Pool.Method method = retune.method();
        if (method != null) {
            hands.retune(pool, PickTerms.method(method));
        }
    }
}
