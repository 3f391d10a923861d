package steelyard.drills.model;

/**
 * What a drain keeps to.
 *
 * @param limitNanos what is in flight that long after it began is cut; above zero
 * @param keepClients whether clients held by affinity are served until the limit
 */
public record Drain(long limitNanos, boolean keepClients) {
    /** What holds where a drill says nothing: cut after 30 s, and held clients go elsewhere. */
    public static final Drain USUAL = new Drain(30_000_000_000L, false);

    public Drain {
        Check.positive(limitNanos, "drain limit");
    }
}
