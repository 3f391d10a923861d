package steelyard.balancer.live.guard;

import java.util.HashMap;
import java.util.Map;

/**
 * The tries of one event loop that wait for a place on a backend. Used on its loop only.
 *
 * <p>A ticket names its loop, so that the answer finds its way; it cannot overtake the entering, since both happen on this
 * loop, the answer in a task of its own.
 */
public final class WaitingRoom {
    /** Whoever waits. */
    @FunctionalInterface
    public interface Waiter {
        /** The answer: a backend for which the try is counted in flight, or {@code Decider.NOBODY}. */
        void placed(int backend);
    }

    private final long step;
    private final Map<Long, Waiter> waiters = new HashMap<>();
    private long next;

    /**
     * @param first ticket
     * @param step from one ticket to the next
     */
    public WaitingRoom(int first, int step) {
        this.next = first;
        this.step = step;
    }

    /** A new ticket. */
    public long ticket() {
        long ticket = next;
        next += step;
        return ticket;
    }

    /** The try with this ticket waits. */
    public void enter(long ticket, Waiter waiter) {
        waiters.put(ticket, waiter);
    }

    /** The try with this ticket will get no answer. */
    public void leave(long ticket) {
        waiters.remove(ticket);
    }

    void placed(long ticket, int backend) {
        Waiter waiter = waiters.remove(ticket);
        if (waiter != null) {
            waiter.placed(backend);
        }
    }
}
