package steelyard.balancer.settings;

/**
 * A backend of a pool.
 *
 * @param weight from 0 to {@link #MOST_WEIGHT}; 0 takes no work under a method that weighs
 * @param host the number of its host
 * @param startsDown whether it is believed down at the start
 * @param tier 1, or 2 for one that stands by
 */
public record BackendSettings(String name, int weight, int host, boolean startsDown, int tier) {
    /** The greatest weight; keeps every product of the exact arithmetic inside a {@code long}. */
    public static final int MOST_WEIGHT = 1_000_000;

    public BackendSettings {
        Check.that(weight >= 0 && weight <= MOST_WEIGHT, "weight of backend %s: %d", name, weight);
        Check.that(host >= 0, "host of backend %s: %d", name, host);
        Check.that(tier == 1 || tier == 2, "tier of backend %s: %d", name, tier);
    }

    /** Of tier 1. */
    public BackendSettings(String name, int weight, int host, boolean startsDown) {
        this(name, weight, host, startsDown, 1);
    }
}
