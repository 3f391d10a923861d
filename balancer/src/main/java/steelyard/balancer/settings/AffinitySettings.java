package steelyard.balancer.settings;

/**
 * How a client is held to a backend.
 *
 * @param cookie the name of the cookie; unread where clients are known by their address
 * @param lastsNanos a client that stays away that long is free again, above zero
 */
public record AffinitySettings(By by, String cookie, long lastsNanos) {
    public AffinitySettings {
        Check.that(!cookie.isEmpty(), "a cookie has a name");
        Check.that(lastsNanos > 0, "affinity lasts %d ns", lastsNanos);
    }

    /** What a client is known by. */
    public enum By {
        /** A signed cookie of the balancer's own. */
        COOKIE,
        /** Its address, without the port. */
        CLIENT
    }
}
