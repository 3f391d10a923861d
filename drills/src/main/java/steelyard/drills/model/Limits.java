package steelyard.drills.model;

/**
 * The largest requests that a pool's front takes, in octets.
 *
 * @param targetBytes of the request target; a longer one gets 414
 * @param headBytes of request line and header fields; a longer head gets 431
 * @param bodyBytes of the content; more gets 413; {@link #NONE} for no limit
 */
public record Limits(int targetBytes, int headBytes, int bodyBytes) {
    /** The value of a limit that there is not. */
    public static final int NONE = -1;

    /** What holds where a drill says nothing; RFC 9112 section 3 recommends a target of 8000 octets at least. */
    public static final Limits USUAL = new Limits(8_000, 32 << 10, NONE);

    public Limits {
        Check.positive(targetBytes, "target");
        Check.that(headBytes > targetBytes, "a head of %d B cannot hold a target of %d B", headBytes, targetBytes);
        Check.that(bodyBytes >= NONE, "body of %d B", bodyBytes);
    }
}
