package steelyard.balancer.settings;

/**
 * What of a request is too large.
 *
 * @param targetBytes of its target, at least 1; beyond it 414
 * @param headBytes of its whole head, at least 1; beyond it 431
 * @param bodyBytes of its content; beyond it 413; {@link Long#MAX_VALUE} for no limit
 */
public record LimitSettings(int targetBytes, int headBytes, long bodyBytes) {
    /** Targets of 8,000 octets, as RFC 9112, 3, recommends; heads of 32 KiB; content without a limit. */
    public static final LimitSettings USUAL = new LimitSettings(8_000, 32 << 10, Long.MAX_VALUE);

    public LimitSettings {
        Check.that(targetBytes >= 1, "target of %d bytes", targetBytes);
        Check.that(headBytes >= 1, "head of %d bytes", headBytes);
        Check.that(bodyBytes >= 0, "body of %d bytes", bodyBytes);
    }
}
