package steelyard.balancer.core.standing;

/**
 * What people ordered for one backend.
 *
 * <pre>
 * state      | admit     | drain                  | withdraw   | limit reached
 * admitted   | -         | draining               | withdrawn  | impossible
 * draining   | admitted  | draining, a new limit  | withdrawn  | draining, what is left is cut once
 * withdrawn  | admitted  | -                      | -          | impossible
 * </pre>
 *
 * A withdrawn backend takes no work already; what it has in flight goes on.
 */
final class Hand {
    /** The states. */
    enum State {
        /** Takes work as far as the other facts allow. */
        ADMITTED,
        /** Takes no new work; what is in flight has until the limit. */
        DRAINING,
        /** Takes no new work. */
        WITHDRAWN
    }

    private State state = State.ADMITTED;
    private boolean limited;
    private long limitAtNanos;

    State state() {
        return state;
    }

    void admit() {
        state = State.ADMITTED;
        limited = false;
    }

    void drain(long limitNanos, long nowNanos) {
        if (state == State.WITHDRAWN) {
            return;
        }
        state = State.DRAINING;
        limited = true;
        limitAtNanos = nowNanos + limitNanos;
    }

    void withdraw() {
        state = State.WITHDRAWN;
        limited = false;
    }

    boolean hasDeadline() {
        return limited;
    }

    long deadlineNanos() {
        return limitAtNanos;
    }

    /** Whether the limit of a drain is reached; says so once. */
    boolean cuts(long nowNanos) {
        if (!limited || nowNanos - limitAtNanos < 0) {
            return false;
        }
        limited = false;
        return true;
    }
}
