package steelyard.backends.behave;

import java.util.Arrays;

/**
 * Planned finishes, earliest first; those of one instant in the order in which they were added. A binary heap over
 * primitive columns. Instants are compared by subtraction, so any two must be less than 292 years apart.
 */
final class FinishHeap {

    private int[] places = new int[16];
    private long[] finishes = new long[16];
    private long[] orders = new long[16];
    private int size;
    private long added;

    boolean isEmpty() {
        return size == 0;
    }

    /** The earliest finish; the heap must not be empty. */
    long firstNanos() {
        return finishes[0];
    }

    void add(int place, long finishNanos) {
        if (size == places.length) {
            places = Arrays.copyOf(places, size * 2);
            finishes = Arrays.copyOf(finishes, size * 2);
            orders = Arrays.copyOf(orders, size * 2);
        }
        int hole = size++;
        long order = added++;
        while (hole > 0) {
            int parent = (hole - 1) >>> 1;
            if (!before(finishNanos, order, parent)) {
                break;
            }
            move(parent, hole);
            hole = parent;
        }
        put(hole, place, finishNanos, order);
    }

    /** Takes the place that finishes first; the heap must not be empty. */
    int remove() {
        int first = places[0];
        size--;
        if (size > 0) {
            sink(places[size], finishes[size], orders[size]);
        }
        return first;
    }

    private void sink(int place, long finishNanos, long order) {
        int hole = 0;
        while (true) {
            int child = 2 * hole + 1;
            if (child >= size) {
                break;
            }
            if (child + 1 < size && before(finishes[child + 1], orders[child + 1], child)) {
                child++;
            }
            if (before(finishNanos, order, child)) {
                break;
            }
            move(child, hole);
            hole = child;
        }
        put(hole, place, finishNanos, order);
    }

    private boolean before(long finishNanos, long order, int other) {
        long ahead = finishNanos - finishes[other];
        return ahead != 0 ? ahead < 0 : order < orders[other];
    }

    private void move(int from, int to) {
        put(to, places[from], finishes[from], orders[from]);
    }

    private void put(int at, int place, long finishNanos, long order) {
        places[at] = place;
        finishes[at] = finishNanos;
        orders[at] = order;
    }
}
