package steelyard.balancer.settings;

import java.util.List;

/**
 * How load probes read utilisations, and what they make of a weight.
 *
 * @param path of the load page
 * @param everyNanos from one start to the next, above zero
 * @param withinNanos an answer must come earlier than that, above zero
 * @param staleAfterNanos a reading older than that no longer counts, and the set weight stands; above zero
 * @param floor the least headroom, from 0.001 to 1
 * @param gauges at least one
 */
public record LoadSettings(
        String path, long everyNanos, long withinNanos, long staleAfterNanos, double floor, List<Gauge> gauges) {
    public LoadSettings {
        gauges = List.copyOf(gauges);
        Check.that(everyNanos > 0, "load every %d ns", everyNanos);
        Check.that(withinNanos > 0, "load within %d ns", withinNanos);
        Check.that(staleAfterNanos > 0, "stale after %d ns", staleAfterNanos);
        Check.that(floor >= 0.001 && floor <= 1, "floor %s", floor);
        Check.that(!gauges.isEmpty(), "load weights need a gauge");
    }

    /**
     * One utilisation that counts.
     *
     * @param ceiling at which no headroom is left, above 0 and at most 1
     * @param gain exponent of the headroom, above 0
     */
    public record Gauge(String name, double ceiling, double gain) {
        public Gauge {
            Check.that(ceiling > 0 && ceiling <= 1, "ceiling of %s: %s", name, ceiling);
            Check.that(gain > 0, "gain of %s: %s", name, gain);
        }
    }
}
