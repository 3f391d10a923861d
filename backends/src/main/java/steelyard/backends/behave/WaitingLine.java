package steelyard.backends.behave;

import java.util.Arrays;

/** Places that wait for a worker, first come, first served: a ring that grows by doubling. */
final class WaitingLine {

    private int[] ring = new int[16];
    private int head;
    private int size;

    int size() {
        return size;
    }

    boolean isEmpty() {
        return size == 0;
    }

    void add(int place) {
        if (size == ring.length) {
            grow();
        }
        ring[(head + size) & (ring.length - 1)] = place;
        size++;
    }

    /** Takes the one that has waited longest; the line must not be empty. */
    int remove() {
        int place = ring[head];
        head = (head + 1) & (ring.length - 1);
        size--;
        return place;
    }

    private void grow() {
        int[] wider = Arrays.copyOf(ring, ring.length * 2);
        // What had wrapped round to the front now follows the old end.
        System.arraycopy(ring, 0, wider, ring.length, head);
        ring = wider;
    }
}
