package steelyard.harness.stage.virtual;

import java.util.Arrays;

/**
 * Messages that all take equally long: they arrive in the order in which they were sent, so a ring will do where a heap
 * would cost a logarithm. What the numbers of a message mean is said by the lane's owner. A message lies in one stretch of
 * memory, since all of it is read at once.
 */
final class Lane {
    /** What {@link #nextNanos} says when the lane is empty. */
    static final long NEVER = Long.MAX_VALUE;

    private static final int FIRST_CAPACITY = 64;
    /** Numbers a message: when it arrives, what it is about, where it goes, and its tag. */
    private static final int WIDTH = 4;

    private final long delayNanos;
    private long[] ring = new long[FIRST_CAPACITY * WIDTH];
    private int head;
    private int size;
    private long nextNanos = NEVER;

    Lane(long delayNanos) {
        this.delayNanos = delayNanos;
    }

    long delayNanos() {
        return delayNanos;
    }

    /** Sends a message; {@code nowNanos} never goes back. */
    void send(long nowNanos, long what, long where, int tag) {
        if (size == ring.length) {
            grow();
        }
        int tail = (head + size) & (ring.length - 1);
        ring[tail] = nowNanos + delayNanos;
        ring[tail + 1] = what;
        ring[tail + 2] = where;
        ring[tail + 3] = tag;
        size += WIDTH;
        nextNanos = ring[head];
    }

    boolean isEmpty() {
        return size == 0;
    }

    /** When the message at the head arrives. */
    long nextNanos() {
        return nextNanos;
    }

    /** Of the message at the head. */
    long what() {
        return ring[head + 1];
    }

    /** Of the message at the head. */
    long where() {
        return ring[head + 2];
    }

    /** Of the message at the head. */
    int tag() {
        return (int) ring[head + 3];
    }

    void drop() {
        head = (head + WIDTH) & (ring.length - 1);
        size -= WIDTH;
        nextNanos = size == 0 ? NEVER : ring[head];
    }

    private void grow() {
        int old = ring.length;
        ring = Arrays.copyOf(ring, 2 * old);
        // What had wrapped round to the front now follows the old end.
        System.arraycopy(ring, 0, ring, old, head);
    }
}
