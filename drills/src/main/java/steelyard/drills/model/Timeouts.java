package steelyard.drills.model;

/**
 * Time limits of the balancer towards a pool's backends and clients.
 *
 * @param connectNanos for a connection to stand; beyond it the backend counts as refused
 * @param firstByteNanos from the whole request sent to the first byte of the answer; beyond it the client gets 504
 * @param idleNanos without a byte either way: a kept connection is closed, a running exchange ended
 * @param headNanos from a request's first octet to its whole head; beyond it the client gets 408
 * @param bodyNanos without a further octet of a request's content; beyond it the client gets 408
 */
public record Timeouts(long connectNanos, long firstByteNanos, long idleNanos, long headNanos, long bodyNanos) {
    private static final long SECOND = 1_000_000_000L;

    /** What holds where a drill says nothing. */
    public static final Timeouts USUAL = new Timeouts(SECOND, 10 * SECOND, 60 * SECOND, 10 * SECOND, 30 * SECOND);

    public Timeouts {
        Check.positive(connectNanos, "connect");
        Check.positive(firstByteNanos, "first-byte");
        Check.positive(idleNanos, "idle");
        Check.positive(headNanos, "head");
        Check.positive(bodyNanos, "body");
    }

    /** Those towards backends, with the usual ones towards clients. */
    public Timeouts(long connectNanos, long firstByteNanos, long idleNanos) {
        this(connectNanos, firstByteNanos, idleNanos, 10 * SECOND, 30 * SECOND);
    }
}
