package steelyard.drills.model;

/**
 * When a backend is set aside on the failures of live requests.
 *
 * @param after failures in a row that bench it, at least 1
 * @param share of failures over the window that benches it, above 0 and at most 1; 0 where the share plays no part
 * @param overNanos length of the window, above zero
 * @param least attempts that the window must hold before its share counts, at least 1
 * @param timeNanos the first bench time; it doubles from one to the next, above zero
 * @param mostNanos the longest bench time, at least the first
 * @param quietNanos each stretch that long off the bench takes one doubling back, above zero
 * @param cap the greatest share of the pool that may be benched at once, above 0 and at most 1
 */
public record Bench(
        int after,
        double share,
        long overNanos,
        int least,
        long timeNanos,
        long mostNanos,
        long quietNanos,
        double cap) {

    private static final long SECOND = 1_000_000_000L;

    /** What holds where a drill says no more than that there is a bench. */
    public static final Bench USUAL = new Bench(4, 0, 15 * SECOND, 25, 6 * SECOND, 90 * SECOND, 45 * SECOND, 0.5);

    public Bench {
        Check.positive(after, "after");
        Check.share(share, "share");
        Check.positive(overNanos, "over");
        Check.positive(least, "least");
        Check.positive(timeNanos, "time");
        Check.that(mostNanos >= timeNanos, "most %d ns is less than the first bench time %d ns", mostNanos, timeNanos);
        Check.positive(quietNanos, "quiet");
        Check.that(cap > 0 && cap <= 1, "cap is above 0 and at most 1, not %s", cap);
    }
}
