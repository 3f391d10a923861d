package steelyard.balancer.settings;

/**
 * Time limits towards backends and clients, all above zero.
 *
 * @param connectNanos for a connection to stand; later counts as refused
 * @param firstByteNanos from the whole request sent to the first byte of the answer; later is a 504
 * @param idleNanos without a byte either way: a kept connection is closed, a running exchange ended
 * @param headNanos from the first octet of a request to the end of its head; later is a 408
 * @param bodyNanos without a further octet of a request's content; longer is a 408
 */
public record TimeoutSettings(long connectNanos, long firstByteNanos, long idleNanos, long headNanos, long bodyNanos) {
    private static final long SECOND = 1_000_000_000L;

    /** 1 s, 10 s, 60 s, 10 s and 30 s. */
    public static final TimeoutSettings USUAL = new TimeoutSettings(SECOND, 10 * SECOND, 60 * SECOND);

    public TimeoutSettings {
        Check.that(connectNanos > 0, "connect %d ns", connectNanos);
        Check.that(firstByteNanos > 0, "first byte %d ns", firstByteNanos);
        Check.that(idleNanos > 0, "idle %d ns", idleNanos);
        Check.that(headNanos > 0, "head %d ns", headNanos);
        Check.that(bodyNanos > 0, "body %d ns", bodyNanos);
    }

    /** With 10 s for a head and 30 s for content that does not move. */
    public TimeoutSettings(long connectNanos, long firstByteNanos, long idleNanos) {
        this(connectNanos, firstByteNanos, idleNanos, 10 * SECOND, 30 * SECOND);
    }
}
