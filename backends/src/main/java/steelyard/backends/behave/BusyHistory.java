package steelyard.backends.behave;

import java.util.Arrays;

/**
 * How many workers were busy over the last second: the corners of a line of steps, in a ring that grows to the most corners
 * that a second ever had. Gives the integral over exactly that second. Nothing was busy before the first corner.
 */
final class BusyHistory {

    static final long SPAN_NANOS = 1_000_000_000L;

    private long[] atNanos = new long[16];
    private int[] busy = new int[16];
    private int head;
    private int size;

    /** From this instant on so many are busy; instants never go back. */
    void changed(long nowNanos, int nowBusy) {
        if (size > 0 && atNanos[index(size - 1)] == nowNanos) {
            busy[index(size - 1)] = nowBusy;
            return;
        }
        forget(nowNanos);
        if (size == busy.length) {
            grow();
        }
        atNanos[index(size)] = nowNanos;
        busy[index(size)] = nowBusy;
        size++;
    }

    /** Busy worker time in the second that ends now, which is not before the last corner. */
    long lastSecondNanos(long nowNanos) {
        forget(nowNanos);
        long sum = 0;
        long laterAgo = 0;
        for (int i = size - 1; i >= 0; i--) {
            // Only the first corner can lie before the second.
            long ago = Math.min(SPAN_NANOS, nowNanos - atNanos[index(i)]);
            sum += (ago - laterAgo) * busy[index(i)];
            laterAgo = ago;
        }
        return sum;
    }

    /** Drops corners whose steps ended a second ago or earlier. */
    private void forget(long nowNanos) {
        while (size > 1 && nowNanos - atNanos[index(1)] >= SPAN_NANOS) {
            head = index(1);
            size--;
        }
    }

    private int index(int i) {
        return (head + i) & (busy.length - 1);
    }

    private void grow() {
        int old = busy.length;
        long[] widerAt = Arrays.copyOf(atNanos, old * 2);
        int[] widerBusy = Arrays.copyOf(busy, old * 2);
        // What had wrapped round to the front now follows the old end.
        System.arraycopy(atNanos, 0, widerAt, old, head);
        System.arraycopy(busy, 0, widerBusy, old, head);
        atNanos = widerAt;
        busy = widerBusy;
    }
}
