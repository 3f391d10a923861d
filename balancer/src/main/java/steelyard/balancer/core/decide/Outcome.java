package steelyard.balancer.core.decide;

/** How one attempt ended, as the balancer saw it. */
public enum Outcome {
    /** A complete answer came, of whatever status. */
    ANSWERED,
    /** The connection was refused, or did not stand in time. */
    REFUSED,
    /** The backend reset or closed the connection before any byte of the answer. */
    RESET,
    /** The backend reset or closed the connection inside the answer. */
    BROKEN,
    /** What came back is not an HTTP answer. */
    MALFORMED,
    /** No byte of the answer came in time. */
    LATE,
    /** Nothing moved for the idle limit, inside the exchange. */
    STALLED,
    /** Cut at the limit of a drain. */
    CUT,
    /** The client went away. */
    ABANDONED;

    /** Whether it says something of how the backend is: a cut and a client's leaving do not. */
    boolean saysOfBackend() {
        return this != CUT && this != ABANDONED;
    }
}
