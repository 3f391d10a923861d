package steelyard.drills.model;

/**
 * Time limits of the balancer towards a pool's backends.
 *
 * @param connectNanos for a connection to stand; beyond it the backend counts as refused
 * @param firstByteNanos from the whole request sent to the first byte of the answer; beyond it the client gets 504
 * @param idleNanos without a byte either way: a kept connection is closed, a running exchange ended
 */
public record Timeouts(long connectNanos, long firstByteNanos, long idleNanos) {
    public Timeouts {
        Check.positive(connectNanos, "connect");
        Check.positive(firstByteNanos, "first-byte");
        Check.positive(idleNanos, "idle");
    }
}
