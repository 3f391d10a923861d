package steelyard.drills.model;

/**
 * What a pool does when few of its backends are pickable.
 *
 * @param lastResort with less than that share of the admitted pickable, all the admitted are picked from; 0 for never
 * @param standby tier 2 is picked only while less than that share of tier 1 is pickable; 0 where there is no tier 2
 */
public record Reserve(double lastResort, double standby) {
    /** Nothing is done. */
    public static final Reserve NONE = new Reserve(0, 0);

    public Reserve {
        Check.share(lastResort, "last-resort");
        Check.share(standby, "standby");
    }
}
