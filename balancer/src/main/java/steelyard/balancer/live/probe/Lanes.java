package steelyard.balancer.live.probe;

import io.netty.bootstrap.Bootstrap;
import java.net.InetSocketAddress;
import java.util.ArrayList;
import java.util.List;
import java.util.function.Function;
import java.util.function.IntFunction;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.tcp.Transport;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.PoolSettings;

/**
 * The ways to all backends on which they are asked something, by backend number. Used on the home loop only.
 *
 * @param <S> the settings of what is asked
 */
final class Lanes<S> {
    private final List<Lane<S>> lanes = new ArrayList<>();
    private boolean closed;

    /**
     * @param addresses by backend number
     * @param tls by pool number; null for a pool without it
     * @param asked null for a pool whose backends are not asked
     */
    Lanes(
            BalancerSettings settings,
            Transport transport,
            List<InetSocketAddress> addresses,
            IntFunction<@Nullable BackendTls> tls,
            Function<PoolSettings, @Nullable S> asked) {
        Bootstrap client = transport.client(transport.home());
        for (int pool = 0; pool < settings.pools().size(); pool++) {
            PoolSettings of = settings.pools().get(pool);
            for (int i = 0; i < of.backends().size(); i++) {
                lanes.add(new Lane<>(client, addresses.get(lanes.size()), tls.apply(pool), asked.apply(of)));
            }
        }
    }

    /** The way to a backend. */
    Lane<S> of(int backend) {
        return lanes.get(backend);
    }

    /** Whether questions are asked at all any more. */
    boolean closed() {
        return closed;
    }

    /** Stops waiting for the answer to a question. */
    void drop(int backend, long number) {
        Question running = lanes.get(backend).running();
        if (running != null && running.number() == number) {
            running.close();
        }
    }

    /** Drops every question; none is to be asked any more. */
    void close() {
        closed = true;
        for (Lane<S> lane : lanes) {
            Question running = lane.running();
            if (running != null) {
                running.close();
            }
        }
    }
}
