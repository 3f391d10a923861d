package steelyard.harness.stage.virtual;

import java.util.Arrays;
import steelyard.balancer.core.decide.Orders;

/** Orders of the Decider in the order in which they came, noted inside its call and carried out after it. */
final class Ordered implements Orders {
    /** What is to be done. */
    enum Kind {
        /** Start the probe {@code number} of a backend. */
        PROBE,
        /** Start the reading {@code number} of a backend. */
        READING,
        /** The try that waits with the ticket {@code number} has its backend. */
        PLACE,
        /** Cut what a backend has in flight. */
        CUT
    }

    private Kind[] kinds = new Kind[8];
    private int[] backends = new int[8];
    private long[] numbers = new long[8];
    private int count;

    @Override
    public void startProbe(int backend, long number) {
        note(Kind.PROBE, backend, number);
    }

    @Override
    public void dropProbe(int backend, long number) {
        // What it brings is ignored by its number.
    }

    @Override
    public void startReading(int backend, long number) {
        note(Kind.READING, backend, number);
    }

    @Override
    public void dropReading(int backend, long number) {
        // What it brings is ignored by its number.
    }

    @Override
    public void place(long ticket, int backend) {
        note(Kind.PLACE, backend, ticket);
    }

    @Override
    public void cut(int backend) {
        note(Kind.CUT, backend, 0);
    }

    private void note(Kind kind, int backend, long number) {
        if (count == kinds.length) {
            kinds = Arrays.copyOf(kinds, 2 * count);
            backends = Arrays.copyOf(backends, 2 * count);
            numbers = Arrays.copyOf(numbers, 2 * count);
        }
        kinds[count] = kind;
        backends[count] = backend;
        numbers[count++] = number;
    }

    /** How many there are; carrying one out may add to them. */
    int count() {
        return count;
    }

    Kind kind(int i) {
        return kinds[i];
    }

    int backend(int i) {
        return backends[i];
    }

    long number(int i) {
        return numbers[i];
    }

    void clear() {
        count = 0;
    }
}
