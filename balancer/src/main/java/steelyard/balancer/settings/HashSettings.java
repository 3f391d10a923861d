package steelyard.balancer.settings;

/**
 * How keys are spread over a pool's members.
 *
 * @param by what of a request is the key
 * @param name of the header field or cookie; empty otherwise
 * @param points of a ring, for each unit of weight, at least 1
 * @param size of a permutation table, a prime above the number of members
 * @param bound no member holds more than that many times the mean in flight, from 1 (Mirrokni, Thorup, Zadimoghaddam,
 *     SODA 2018); 0 for no bound
 */
public record HashSettings(By by, String name, Table table, int points, int size, double bound) {
    /** By the client's address, on a ring of a hundred points a unit of weight. */
    public static final HashSettings USUAL = new HashSettings(By.CLIENT, "", Table.RING, 100, 65_537, 0);

    public HashSettings {
        Check.that(points >= 1, "points: %d", points);
        Check.that(size >= 2, "size: %d", size);
        Check.that(bound == 0 || bound >= 1, "bound: %s", bound);
        Check.that((by == By.HEADER || by == By.COOKIE) != name.isEmpty(), "a header or cookie has a name: %s", name);
    }

    /** What the key is. */
    public enum By {
        /** The client's address, without its port. */
        CLIENT,
        /** Path and query as received. */
        PATH,
        /** The value of a header field. */
        HEADER,
        /** The value of a cookie. */
        COOKIE
    }

    /** How a key finds its member. */
    public enum Table {
        /** Points on a ring; a key belongs to the next point (Karger et al., STOC 1997). */
        RING,
        /** The member with the highest hash of key and member (Thaler, Ravishankar, IEEE/ACM ToN 6(1) 1998). */
        RENDEZVOUS,
        /** A lookup table that members fill in turn, each by its own permutation (Eisenbud et al., NSDI 2016, 3.4). */
        PERMUTATION
    }
}
