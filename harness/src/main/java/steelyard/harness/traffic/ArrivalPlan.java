package steelyard.harness.traffic;

import java.util.List;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Traffic;

/**
 * Every request of a play: when it is due, of which kind, from which client.
 *
 * <p>Open loop: nothing that happens in a play changes it but a surge. Requests of all streams are merged and numbered
 * from 0 by due time, those of one instant by stream. Each draw is keyed by stream and place within the stream, so two
 * plays of one seed see the same requests, whatever the balancer does.
 *
 * <p>It is polled: look at {@link #nextDueNanos}, call {@link #take}, then read the request taken. Instants are play time.
 * Nothing is allocated for a request; one costs O(streams + log clients). One thread at a time.
 */
public final class ArrivalPlan {
    private final StreamPlan[] streams;
    private int next;

    private long taken;
    private long takenDueNanos;
    private int takenTraffic;
    private int takenKind;
    private int takenClient;

    /**
     * @param traffic at least one stream
     * @param lastsNanos no request is due at or after it
     */
    public ArrivalPlan(List<Traffic> traffic, long lastsNanos, Chance chance) {
        streams = new StreamPlan[traffic.size()];
        for (int i = 0; i < streams.length; i++) {
            streams[i] = new StreamPlan(traffic.get(i), i, lastsNanos, chance);
        }
        taken = -1;
        findNext();
    }

    /** Whether a request is still to come, as rates stand now: a later surge can bring a silent stream back. */
    public boolean hasNext() {
        return streams[next].dueNanos() != StreamPlan.NEVER;
    }

    /** When the next request is due; {@link Long#MAX_VALUE} when there is none. */
    public long nextDueNanos() {
        return streams[next].dueNanos();
    }

    /**
     * Takes the next request; the methods below then tell about it until the next call.
     *
     * @throws IllegalStateException when there is none
     */
    public void take() {
        if (!hasNext()) {
            throw new IllegalStateException("no request is due any more");
        }
        StreamPlan stream = streams[next];
        taken++;
        takenDueNanos = stream.dueNanos();
        takenTraffic = next;
        takenKind = stream.kind();
        takenClient = stream.client();
        stream.advance();
        findNext();
    }

    /** Number of the request taken, from 0. */
    public long request() {
        return taken;
    }

    public long dueNanos() {
        return takenDueNanos;
    }

    /** Number of its traffic stream. */
    public int traffic() {
        return takenTraffic;
    }

    /** Its place in the mix of the stream. */
    public int kind() {
        return takenKind;
    }

    /** Number of its client within the stream. */
    public int client() {
        return takenClient;
    }

    /**
     * From {@code nowNanos} on, the rates of a stream count {@code factor} times (not times an earlier factor). What
     * remains of the current gap is rescaled.
     *
     * @param factor 0 or above; 1 ends a surge
     * @param nowNanos not before the request last taken; requests due before it should have been taken
     */
    public void surge(int traffic, double factor, long nowNanos) {
        streams[traffic].surge(factor, nowNanos);
        findNext();
    }

    private void findNext() {
        int first = 0;
        for (int i = 1; i < streams.length; i++) {
            if (streams[i].dueNanos() < streams[first].dueNanos()) {
                first = i;
            }
        }
        next = first;
    }
}
