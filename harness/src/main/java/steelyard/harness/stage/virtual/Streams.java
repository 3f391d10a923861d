package steelyard.harness.stage.virtual;

import java.util.Arrays;
import java.util.List;
import java.util.Set;
import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.PoolSettings;
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
    private final long[][] openNanos;
    private final RequestKeys keys;
    private final boolean[] hashes;
    private final boolean[] says;

    Streams(Drill drill, BalancerSettings settings) {
        List<Traffic> traffic = drill.traffic();
        List<PoolSettings> byNumber = settings.pools();
        pools = new Cast(drill).poolsOfTraffic();
        PoolRules[] byPool = byNumber.stream().map(PoolRules::of).toArray(PoolRules[]::new);
        rules = Arrays.stream(pools).mapToObj(pool -> byPool[pool]).toArray(PoolRules[]::new);
        idempotent = traffic.stream().map(Streams::idempotent).toArray(boolean[][]::new);
        openNanos = traffic.stream()
                .map(each -> each.requests().stream()
                        .mapToLong(Traffic.Request::openNanos)
                        .toArray())
                .toArray(long[][]::new);
        keys = new RequestKeys(drill, byNumber);
        hashes = new boolean[pools.length];
        says = new boolean[pools.length];
        for (int stream = 0; stream < pools.length; stream++) {
            // Only a pool that begins with keys can come back to them when it is retuned.
            hashes[stream] = byNumber.get(pools[stream]).method() == PoolSettings.Method.HASH;
            says[stream] = hashes[stream] || rules[stream].byAddress() || rules[stream].berthNanos() > 0;
        }
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

    /** Whether any goes through on connections as they are. */
    boolean anyOctets() {
        return Arrays.stream(rules).anyMatch(PoolRules::octets);
    }

    boolean idempotent(int stream, int kind) {
        return idempotent[stream][kind];
    }

    /** How long the tunnel of a request stays open; 0 for one that asks for none. */
    long openNanos(int stream, int kind) {
        return openNanos[stream][kind];
    }

    /** Whether a pick has to know anything of the client or of the request. */
    boolean says(int stream) {
        return says[stream];
    }

    /** Says it; {@code held} is the backend that the client's cookie names. */
    void say(Ask ask, int stream, int kind, int client, int held) {
        if (hashes[stream]) {
            ask.key = keys.key(stream, kind, client);
        }
        if (rules[stream].byAddress()) {
            ask.client = keys.address(stream, client);
        }
        if (rules[stream].berthNanos() > 0) {
            ask.held = held;
        }
    }
}
