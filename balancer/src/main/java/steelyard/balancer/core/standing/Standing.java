package steelyard.balancer.core.standing;

/** The word for what the balancer thinks of a backend: the first of these that holds. */
public enum Standing {
    /** Taken out by hand. */
    WITHDRAWN,
    /** Takes no new work by hand; what is in flight goes on. */
    DRAINING,
    /** Probes failed. */
    DOWN,
    /** Set aside, since attempts at it failed. */
    BENCHED,
    /** Back, and ramping up to its full weight. */
    WARMING,
    /** Takes its full share. */
    UP;

    /** Whether new work may be given to a backend that stands so. */
    public boolean pickable() {
        return this == UP || this == WARMING;
    }
}
