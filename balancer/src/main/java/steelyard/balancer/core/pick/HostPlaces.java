package steelyard.balancer.core.pick;

import java.util.ArrayList;
import java.util.List;

/**
 * The places of all hosts of a balancer instance, shared by every pool that counts weights by host: a turn that one pool
 * takes is taken for all, so the hosts' totals, not the pools', hold the hosts' weights.
 *
 * <p>First tries and retries have places of their own, so an instance owns two of these. Not thread-safe.
 */
public final class HostPlaces {
    final Turns turns;
    private final List<HostTurns> pools = new ArrayList<>();

    /** @param weights of the hosts, each at least 0; a host of weight 0 takes no work */
    public HostPlaces(int[] weights) {
        turns = new Turns(weights.length);
        for (int host = 0; host < weights.length; host++) {
            turns.weigh(host, weights[host]);
        }
    }

    /** Changes a host's weight for every pool. */
    public void weigh(int host, int weight) {
        turns.weigh(host, weight);
        for (HostTurns pool : pools) {
            pool.hostWeighed(host);
        }
    }

    void join(HostTurns pool) {
        pools.add(pool);
    }

    int hosts() {
        return turns.holders();
    }

    void take(int host) {
        turns.take(host);
        moved(host);
    }

    void moved(int host) {
        for (HostTurns pool : pools) {
            pool.hostMoved(host);
        }
    }
}
