package steelyard.drills.model;

import org.jspecify.annotations.Nullable;

/**
 * What a hash method hashes, and the table that it looks up in.
 *
 * @param name the header or cookie that is hashed; null for client and path
 * @param points of {@link Table#RING}: a member's points per unit of weight (Karger 1997)
 * @param size of {@link Table#PERMUTATION}: entries of the table, a prime (Eisenbud 2016)
 * @param bound no member holds more than that share of the mean in-flight load, at least 1 (Mirrokni 2018); 0 for none
 */
public record Hashing(By by, @Nullable String name, Table table, int points, int size, double bound) {
    /** What holds where a drill says no more than what is hashed. */
    public static final Hashing USUAL = new Hashing(By.CLIENT, null, Table.RING, 100, 65_537, 0);

    public Hashing {
        Check.that(by.named() == (name != null), "hash by %s, name %s", by.word(), name);
        Check.positive(points, "points");
        Check.positive(size, "size");
        Check.that(bound == 0 || bound >= 1, "bound is at least 100 %%, not %s", bound);
    }

    /** What of a request is hashed. */
    public enum By implements Worded {
        /** The address of the client. */
        CLIENT("client"),
        /** The request target. */
        PATH("path"),
        HEADER("header"),
        COOKIE("cookie");

        private final String word;

        By(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }

        /** Whether it takes the name of a field. */
        public boolean named() {
            return this == HEADER || this == COOKIE;
        }
    }

    /** How a hash leads to a backend. */
    public enum Table implements Worded {
        RING("ring"),
        RENDEZVOUS("rendezvous"),
        PERMUTATION("permutation");

        private final String word;

        Table(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }
}
