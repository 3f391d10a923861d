package steelyard.balancer.settings;

/**
 * What a pool falls back on when few may be picked.
 *
 * @param lastResort pickable less than that share of the admitted, every admitted one is picked from; 0 for never
 * @param standby pickable less than that share of tier 1, tier 2 is picked from too; 0 where there is no tier 2
 */
public record ReserveSettings(double lastResort, double standby) {
    /** Nothing. */
    public static final ReserveSettings NONE = new ReserveSettings(0, 0);

    public ReserveSettings {
        Check.that(lastResort >= 0 && lastResort <= 1, "last resort %s", lastResort);
        Check.that(standby >= 0 && standby <= 1, "standby %s", standby);
    }
}
