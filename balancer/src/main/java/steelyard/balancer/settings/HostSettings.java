package steelyard.balancer.settings;

/**
 * A host.
 *
 * @param weight turns per cycle where weights are the hosts', at least 0
 */
public record HostSettings(String name, int weight) {
    public HostSettings {
        Check.that(weight >= 0 && weight <= BackendSettings.MOST_WEIGHT, "weight of host %s: %d", name, weight);
    }
}
