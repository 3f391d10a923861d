package steelyard.harness.stage.live;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Traffic.Request;

/** One request of the generator, from when it is due to its end. Lives on the generator's loop. */
final class Exchange {
    final long request;
    final long dueNanos;
    final int traffic;
    final int kind;
    final Request asks;
    /** Play time at which its client gives up. */
    final long deadlineNanos;

    private boolean ended;
    private @Nullable ClientConnection connection;
    private boolean tunnel;
    private long openedNanos;

    Exchange(long request, long dueNanos, int traffic, int kind, Request asks, long giveUpNanos) {
        this.request = request;
        this.dueNanos = dueNanos;
        this.traffic = traffic;
        this.kind = kind;
        this.asks = asks;
        this.deadlineNanos = dueNanos + giveUpNanos;
    }

    boolean hasEnded() {
        return ended;
    }

    /** Marks the end. Returns whether it was the first: a request ends once. */
    boolean end() {
        boolean first = !ended;
        ended = true;
        return first;
    }

    /** Whether its connection has become a tunnel: its client no longer gives up then. */
    boolean tunnel() {
        return tunnel;
    }

    /** When its tunnel stood, in play time; only while there is, or was, one. */
    long openedNanos() {
        return openedNanos;
    }

    void tunnelOpened(long nowNanos) {
        tunnel = true;
        openedNanos = nowNanos;
    }

    /** The connection that carries it, once it was sent. */
    @Nullable
    ClientConnection connection() {
        return connection;
    }

    void sentOn(ClientConnection carrier) {
        connection = carrier;
    }
}
