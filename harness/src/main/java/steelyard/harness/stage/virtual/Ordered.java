package steelyard.harness.stage.virtual;

import java.util.Arrays;

/** Orders of the Decider, noted inside its call and carried out after it. */
final class Ordered {
    private int[] probeBackends = new int[8];
    private long[] probeNumbers = new long[8];
    private int probes;
    private int[] cutBackends = new int[8];
    private int cuts;

    void probe(int backend, long number) {
        if (probes == probeBackends.length) {
            probeBackends = Arrays.copyOf(probeBackends, 2 * probes);
            probeNumbers = Arrays.copyOf(probeNumbers, 2 * probes);
        }
        probeBackends[probes] = backend;
        probeNumbers[probes++] = number;
    }

    void cut(int backend) {
        if (cuts == cutBackends.length) {
            cutBackends = Arrays.copyOf(cutBackends, 2 * cuts);
        }
        cutBackends[cuts++] = backend;
    }

    int probes() {
        return probes;
    }

    int probeBackend(int i) {
        return probeBackends[i];
    }

    long probeNumber(int i) {
        return probeNumbers[i];
    }

    int cuts() {
        return cuts;
    }

    int cutBackend(int i) {
        return cutBackends[i];
    }

    void clear() {
        probes = 0;
        cuts = 0;
    }
}
