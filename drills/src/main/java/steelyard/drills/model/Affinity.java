package steelyard.drills.model;

import org.jspecify.annotations.Nullable;

/**
 * How a client is held to the backend that served it.
 *
 * @param cookie the name of the cookie that holds it; null by client
 * @param lastsNanos a client that asks for nothing that long is held no more; above zero
 */
public record Affinity(By by, @Nullable String cookie, long lastsNanos) {
    /** The name of the cookie unless a drill says otherwise. */
    public static final String USUAL_COOKIE = "steelyard-berth";

    /** How long a client is held unless a drill says otherwise: half an hour. */
    public static final long USUAL_LASTS_NANOS = 1_800_000_000_000L;

    public Affinity {
        Check.that((by == By.COOKIE) == (cookie != null), "affinity by %s, cookie %s", by.word(), cookie);
        Check.positive(lastsNanos, "lasts");
    }

    /** Held by the usual cookie for the usual time. */
    public static Affinity byCookie() {
        return new Affinity(By.COOKIE, USUAL_COOKIE, USUAL_LASTS_NANOS);
    }

    /** Held by address for the usual time. */
    public static Affinity byClient() {
        return new Affinity(By.CLIENT, null, USUAL_LASTS_NANOS);
    }

    /** What a client is known by. */
    public enum By implements Worded {
        COOKIE("cookie"),
        /** Its address. */
        CLIENT("client");

        private final String word;

        By(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }
}
