package steelyard.balancer.settings;

/**
 * Time limits towards backends, all above zero.
 *
 * @param connectNanos for a connection to stand; later counts as refused
 * @param firstByteNanos from the whole request sent to the first byte of the answer; later is a 504
 * @param idleNanos without a byte either way: a kept connection is closed, a running exchange ended
 */
public record TimeoutSettings(long connectNanos, long firstByteNanos, long idleNanos) {
    public TimeoutSettings {
        Check.that(connectNanos > 0, "connect %d ns", connectNanos);
        Check.that(firstByteNanos > 0, "first byte %d ns", firstByteNanos);
        Check.that(idleNanos > 0, "idle %d ns", idleNanos);
    }
}
