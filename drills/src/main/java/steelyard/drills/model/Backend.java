package steelyard.drills.model;

/**
 * One backend of a pool.
 *
 * @param name unique on the stage
 * @param group the name of the entry that it comes from: its own, or that of the entry with {@code times:}
 * @param weight at least 0; 0 takes no work under a method that weighs
 * @param host the name of its host
 * @param startsDown whether the balancer believes it down when the play starts
 * @param tier 1, or 2 for one that stands by
 */
public record Backend(String name, String group, int weight, String host, boolean startsDown, int tier, Serves serves) {
    public Backend {
        Check.notNegative(weight, "weight of " + name);
        Check.that(tier == 1 || tier == 2, "tier %d of %s", tier, name);
    }

    /** A backend of the first tier. */
    public Backend(String name, String group, int weight, String host, boolean startsDown, Serves serves) {
        this(name, group, weight, host, startsDown, 1, serves);
    }
}
