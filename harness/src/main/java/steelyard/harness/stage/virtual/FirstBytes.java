package steelyard.harness.stage.virtual;

import java.util.List;
import steelyard.balancer.settings.PoolSettings;

/**
 * The limits on the first byte of answers, pool by pool: from the request sent, which on a new connection is later. Nearly
 * all answers come long before, so what is over at the front goes whenever something is added: what is kept reaches back
 * no further than the oldest attempt under way.
 */
final class FirstBytes {
    private final Flights flights;
    private final Lane[] onKept;
    private final Lane[] onNew;
    private long nextNanos = Lane.NEVER;

    FirstBytes(Flights flights, List<PoolSettings> pools, long hopNanos) {
        this.flights = flights;
        onKept = pools.stream()
                .map(each -> new Lane(each.timeouts().firstByteNanos()))
                .toArray(Lane[]::new);
        onNew = pools.stream()
                .map(each -> new Lane(each.timeouts().firstByteNanos() + hopsToBeUsable(each) * hopNanos))
                .toArray(Lane[]::new);
    }

    /** From the backend's acceptance of a connection until the balancer can use it. */
    private static int hopsToBeUsable(PoolSettings pool) {
        return pool.front().backendTls() ? 3 : 1;
    }

    void sentOnKept(int pool, long token, long nowNanos) {
        add(onKept[pool], token, nowNanos);
    }

    /** The backend has just accepted; the request goes out when the balancer knows. */
    void acceptedNew(int pool, long token, long nowNanos) {
        add(onNew[pool], token, nowNanos);
    }

    private void add(Lane lane, long token, long nowNanos) {
        while (!lane.isEmpty() && !flights.current(lane.what())) {
            lane.drop();
        }
        lane.send(nowNanos, token, 0, 0);
        findNext();
    }

    long nextNanos() {
        return nextNanos;
    }

    private void findNext() {
        long next = Lane.NEVER;
        for (int pool = 0; pool < onKept.length; pool++) {
            next = Math.min(next, Math.min(onKept[pool].nextNanos(), onNew[pool].nextNanos()));
        }
        nextNanos = next;
    }

    /** The token of an attempt whose time is over at {@code nowNanos}, or -1 when there is none any more. */
    long expired(long nowNanos) {
        if (nowNanos != nextNanos) {
            return -1;
        }
        for (int pool = 0; pool < onKept.length; pool++) {
            Lane lane = onKept[pool].nextNanos() == nowNanos ? onKept[pool] : onNew[pool];
            if (lane.nextNanos() == nowNanos) {
                long token = lane.what();
                lane.drop();
                findNext();
                return token;
            }
        }
        return -1;
    }
}
