package steelyard.harness.stage.virtual;

import java.util.Arrays;
import steelyard.balancer.core.decide.Orders;

/** Orders of the Decider, noted inside its call and carried out after it. */
final class Ordered implements Orders {
    private int[] probeBackends = new int[8];
    private long[] probeNumbers = new long[8];
    private int probes;
    private int[] cutBackends = new int[8];
    private int cuts;

    @Override
    public void startProbe(int backend, long number) {
        if (probes == probeBackends.length) {
            probeBackends = Arrays.copyOf(probeBackends, 2 * probes);
            probeNumbers = Arrays.copyOf(probeNumbers, 2 * probes);
        }
        probeBackends[probes] = backend;
        probeNumbers[probes++] = number;
    }

    @Override
    public void dropProbe(int backend, long number) {
        // What it brings is ignored by its number.
    }

    @Override
    public void startReading(int backend, long number) {
        throw new IllegalStateException("no pool here reads load");
    }

    @Override
    public void dropReading(int backend, long number) {
        throw new IllegalStateException("no pool here reads load");
    }

    @Override
    public void place(long ticket, int backend) {
        throw new IllegalStateException("nobody waits here");
    }

    @Override
    public void cut(int backend) {
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
