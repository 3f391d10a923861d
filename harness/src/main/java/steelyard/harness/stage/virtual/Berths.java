package steelyard.harness.stage.virtual;

import java.util.Arrays;
import java.util.List;
import steelyard.balancer.core.decide.Decider;
import steelyard.drills.model.Traffic;

/** The cookies by which the clients of each stream are held to backends, as the clients keep them. */
final class Berths {
    private final Streams streams;
    private final int[][] backends;
    private final long[][] untilNanos;

    Berths(List<Traffic> traffic, Streams streams) {
        this.streams = streams;
        backends = new int[traffic.size()][];
        untilNanos = new long[traffic.size()][];
        for (int stream = 0; stream < backends.length; stream++) {
            boolean kept = streams.rules(stream).berthNanos() > 0;
            int clients = kept ? traffic.get(stream).clients() : 0;
            backends[stream] = new int[clients];
            untilNanos[stream] = new long[clients];
            Arrays.fill(backends[stream], Decider.NOBODY);
        }
    }

    /** The backend that a client's cookie names, or nobody. */
    int held(int stream, int client, long nowNanos) {
        return backends[stream].length == 0 || nowNanos >= untilNanos[stream][client]
                ? Decider.NOBODY
                : backends[stream][client];
    }

    /** A backend's answer reached a client; each renews the cookie. */
    void answered(int stream, int client, int backend, long nowNanos) {
        if (backends[stream].length > 0) {
            backends[stream][client] = backend;
            untilNanos[stream][client] = nowNanos + streams.rules(stream).berthNanos();
        }
    }
}
