package steelyard.harness.stage.virtual;

import java.util.Arrays;

/**
 * Messages that all take equally long: they arrive in the order in which they were sent, so a ring will do where a heap
 * would cost a logarithm. Each carries two numbers, whose meaning is the lane's.
 */
final class Lane {
    /** What {@link #nextNanos} says when the lane is empty. */
    static final long NEVER = Long.MAX_VALUE;

    private final long delayNanos;
    private long[] at = new long[64];
    private long[] what = new long[64];
    private long[] where = new long[64];
    private int head;
    private int size;

    Lane(long delayNanos) {
        this.delayNanos = delayNanos;
    }

    long delayNanos() {
        return delayNanos;
    }

    /** Sends a message; {@code nowNanos} never goes back. */
    void send(long nowNanos, long whatNumber, long whereNumber) {
        if (size == at.length) {
            grow();
        }
        int tail = (head + size) & (at.length - 1);
        at[tail] = nowNanos + delayNanos;
        what[tail] = whatNumber;
        where[tail] = whereNumber;
        size++;
    }

    long nextNanos() {
        return size == 0 ? NEVER : at[head];
    }

    /** Of the message at the head. */
    long what() {
        return what[head];
    }

    /** Of the message at the head. */
    long where() {
        return where[head];
    }

    void drop() {
        head = (head + 1) & (at.length - 1);
        size--;
    }

    private void grow() {
        int old = at.length;
        at = Arrays.copyOf(at, 2 * old);
        what = Arrays.copyOf(what, 2 * old);
        where = Arrays.copyOf(where, 2 * old);
        // What had wrapped round to the front now follows the old end.
        System.arraycopy(at, 0, at, old, head);
        System.arraycopy(what, 0, what, old, head);
        System.arraycopy(where, 0, where, old, head);
    }
}
