package steelyard.drills.model;

import org.jspecify.annotations.Nullable;

/**
 * A machine that carries backends, perhaps of several pools.
 *
 * @param weight at least 0; turns per cycle where a pool counts weights by host
 * @param zone the zone that it stands in, or null
 */
public record Host(String name, int weight, @Nullable String zone) {
    public Host {
        Check.notNegative(weight, "weight of host " + name);
    }
}
