package steelyard.balancer.core.decide;

import org.jspecify.annotations.Nullable;

/**
 * Tries of one pool that wait for a place, in the order in which they came.
 *
 * <p>A ring of copies that are filled again and again: once it has been as long as it gets, nothing is allocated. Those at
 * the front leave in a step; one that leaves from the middle has those behind it moved up.
 */
final class WaitingLine {
    private static final int FIRST_SIZE = 8;

    private static final class Waiter {
        final Ask ask = new Ask();
        long untilNanos;
    }

    private final int room;
    private final long waitNanos;
    private @Nullable Waiter[] ring = new @Nullable Waiter[FIRST_SIZE];
    private int head;
    private int waiting;

    /**
     * @param room for so many
     * @param waitNanos how long one waits
     */
    WaitingLine(int room, long waitNanos) {
        this.room = room;
        this.waitNanos = waitNanos;
    }

    int waiting() {
        return waiting;
    }

    boolean hasRoom() {
        return waiting < room;
    }

    /** Puts a copy at the end. Only while there is room. */
    void join(Ask ask, long nowNanos) {
        if (waiting == ring.length) {
            grow();
        }
        int slot = slot(waiting++);
        Waiter waiter = ring[slot];
        if (waiter == null) {
            waiter = new Waiter();
            ring[slot] = waiter;
        }
        waiter.ask.become(ask);
        waiter.untilNanos = nowNanos + waitNanos;
    }

    /** The one at a place, from 0 for the front; good until it leaves. */
    Ask at(int place) {
        return waiter(place).ask;
    }

    /** When the time of the one at a place is over. */
    long untilNanos(int place) {
        return waiter(place).untilNanos;
    }

    /** The place of a ticket, or -1. */
    int find(long ticket) {
        for (int place = 0; place < waiting; place++) {
            if (at(place).ticket == ticket) {
                return place;
            }
        }
        return -1;
    }

    /** Takes the one at a place out. */
    void remove(int place) {
        if (place == 0) {
            head = slot(1);
        } else {
            @Nullable Waiter gone = ring[slot(place)];
            for (int i = place; i < waiting - 1; i++) {
                ring[slot(i)] = ring[slot(i + 1)];
            }
            ring[slot(waiting - 1)] = gone;
        }
        waiting--;
    }

    private Waiter waiter(int place) {
        Waiter waiter = ring[slot(place)];
        if (waiter == null || place >= waiting) {
            throw new IndexOutOfBoundsException(place);
        }
        return waiter;
    }

    private int slot(int place) {
        return head + place & ring.length - 1;
    }

    private void grow() {
        @Nullable Waiter[] longer = new @Nullable Waiter[2 * ring.length];
        for (int place = 0; place < waiting; place++) {
            longer[place] = ring[slot(place)];
        }
        ring = longer;
        head = 0;
    }
}
