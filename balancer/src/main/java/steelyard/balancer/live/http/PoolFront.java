package steelyard.balancer.live.http;

import io.netty.util.AsciiString;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.settings.PoolSettings;

/**
 * What all client connections of one pool share.
 *
 * @param number of the pool
 * @param balancer the pseudonym in Via and Proxy-Status
 */
record PoolFront(
        int number,
        PoolSettings settings,
        GuardedDecider decider,
        RequestNumbers numbers,
        String balancer,
        AsciiString via11,
        AsciiString via10,
        HiddenNames hiddenNames) {

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
                new HiddenNames());
    }

    boolean pins() {
        return settings.count() == PoolSettings.Count.CONNECTIONS;
    }

    boolean retries() {
        return settings.retry() != null;
    }
}
