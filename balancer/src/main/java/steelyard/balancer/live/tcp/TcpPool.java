package steelyard.balancer.live.tcp;

import java.net.InetSocketAddress;
import java.util.List;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicLong;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.live.tls.FrontTls;
import steelyard.balancer.settings.PoolSettings;

/**
 * What all connections of one pool of octets share.
 *
 * @param number of the pool
 * @param addresses of all backends of the balancer, by number
 * @param numbers counted down from -1 for whatever brings no number of its own
 */
record TcpPool(
        int number,
        PoolSettings settings,
        GuardedDecider decider,
        List<InetSocketAddress> addresses,
        AtomicLong numbers,
        @Nullable FrontTls tls,
        @Nullable BackendTls backendTls) {

    int connectMillis() {
        long millis = TimeUnit.NANOSECONDS.toMillis(settings.timeouts().connectNanos());
        return (int) Math.max(1, Math.min(millis, Integer.MAX_VALUE));
    }
}
