package steelyard.harness.stage.virtual;

import java.util.List;
import steelyard.balancer.settings.PoolSettings;

/** The limits on the first byte of answers, pool by pool: from the request sent, which on a new connection is later. */
final class FirstBytes {
    private final Lane[] onKept;
    private final Lane[] onNew;

    /** @param returnHopNanos from the backend's side of a new connection to the balancer's */
    FirstBytes(List<PoolSettings> pools, long returnHopNanos) {
        onKept = pools.stream()
                .map(each -> new Lane(each.timeouts().firstByteNanos()))
                .toArray(Lane[]::new);
        onNew = pools.stream()
                .map(each -> new Lane(each.timeouts().firstByteNanos() + returnHopNanos))
                .toArray(Lane[]::new);
    }

    void sentOnKept(int pool, long token, long nowNanos) {
        onKept[pool].send(nowNanos, token, 0);
    }

    /** The backend has just accepted; the request goes out when the balancer knows. */
    void acceptedNew(int pool, long token, long nowNanos) {
        onNew[pool].send(nowNanos, token, 0);
    }

    long nextNanos() {
        long next = Lane.NEVER;
        for (int pool = 0; pool < onKept.length; pool++) {
            next = Math.min(next, Math.min(onKept[pool].nextNanos(), onNew[pool].nextNanos()));
        }
        return next;
    }

    /** The token of an attempt whose time is over at {@code nowNanos}, or -1 when there is none any more. */
    long expired(long nowNanos) {
        for (int pool = 0; pool < onKept.length; pool++) {
            Lane lane = onKept[pool].nextNanos() == nowNanos ? onKept[pool] : onNew[pool];
            if (lane.nextNanos() == nowNanos) {
                long token = lane.what();
                lane.drop();
                return token;
            }
        }
        return -1;
    }
}
