package steelyard.balancer.settings;

/**
 * What a drain keeps to.
 *
 * @param limitNanos what is in flight that long after a drain began is cut; above zero
 * @param keepsClients whether clients that affinity holds to the backend are served by it until then
 */
public record DrainSettings(long limitNanos, boolean keepsClients) {
    public DrainSettings {
        Check.that(limitNanos > 0, "drain limit: %d ns", limitNanos);
    }
}
