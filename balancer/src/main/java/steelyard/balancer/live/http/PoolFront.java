package steelyard.balancer.live.http;

import io.netty.util.AsciiString;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.settings.PoolSettings;

/**
 * What all client connections of one pool share.
 *
 * @param number of the pool
 * @param balancer the pseudonym in Via and Proxy-Status
 * @param berths null for a pool that holds nobody by cookie
 */
record PoolFront(
        int number,
        PoolSettings settings,
        GuardedDecider decider,
        RequestNumbers numbers,
        String balancer,
        AsciiString via11,
        AsciiString via10,
        HiddenNames hiddenNames,
        @Nullable Berths berths) {

    static PoolFront of(
            int number, PoolSettings settings, GuardedDecider decider, RequestNumbers numbers, String balancer) {
        return new PoolFront(
                number,
                settings,
                decider,
                numbers,
                balancer,
                AsciiString.cached("1.1 " + balancer),
                AsciiString.cached("1.0 " + balancer),
                new HiddenNames(),
                null);
    }

    PoolFront with(@Nullable Berths set) {
        return new PoolFront(number, settings, decider, numbers, balancer, via11, via10, hiddenNames, set);
    }

    boolean pins() {
        return settings.count() == PoolSettings.Count.CONNECTIONS;
    }

    boolean retries() {
        return settings.retry() != null;
    }
}
