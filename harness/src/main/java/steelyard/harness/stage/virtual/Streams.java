package steelyard.harness.stage.virtual;

import java.util.Arrays;
import java.util.List;
import java.util.Set;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Traffic;
import steelyard.harness.record.Cast;

/** What of traffic streams, and of the pools that they go to, is looked up for every request. */
final class Streams {
    /** RFC 9110, 9.2.2. */
    private static final Set<String> IDEMPOTENT = Set.of("GET", "HEAD", "OPTIONS", "TRACE", "PUT", "DELETE");

    private final int[] pools;
    private final PoolRules[] rules;
    private final boolean[][] idempotent;

    Streams(Drill drill, BalancerSettings settings) {
        List<Traffic> traffic = drill.traffic();
        pools = new Cast(drill).poolsOfTraffic();
        PoolRules[] byPool = settings.pools().stream().map(PoolRules::of).toArray(PoolRules[]::new);
        rules = Arrays.stream(pools).mapToObj(pool -> byPool[pool]).toArray(PoolRules[]::new);
        idempotent = traffic.stream().map(Streams::idempotent).toArray(boolean[][]::new);
    }

    private static boolean[] idempotent(Traffic traffic) {
        boolean[] each = new boolean[traffic.requests().size()];
        for (int kind = 0; kind < each.length; kind++) {
            each[kind] = IDEMPOTENT.contains(traffic.requests().get(kind).method());
        }
        return each;
    }

    /** The number of the pool that a stream goes to. */
    int pool(int stream) {
        return pools[stream];
    }

    /** Those of the pool that a stream goes to. */
    PoolRules rules(int stream) {
        return rules[stream];
    }

    boolean idempotent(int stream, int kind) {
        return idempotent[stream][kind];
    }
}
