package steelyard.drills.model;

import java.util.List;

/**
 * How the utilisations of a pool's backends are read, and what is made of them.
 *
 * @param path of the load page
 * @param everyNanos from one start to the next, above zero
 * @param withinNanos a reading that does not come earlier is missed; above zero
 * @param staleAfterNanos an older reading counts no more, and the set weight holds; above zero
 * @param floor the least headroom of one gauge, above 0 and at most 1
 * @param costNanos worker time that a reading takes on the backend; 0 for none
 * @param gauges those that count, at least one, each once
 */
public record LoadProbe(
        String path,
        long everyNanos,
        long withinNanos,
        long staleAfterNanos,
        double floor,
        long costNanos,
        List<Gauge> gauges) {

    /** What holds where a drill says nothing: the processor alone, every second. */
    public static final LoadProbe USUAL = new LoadProbe(
            "/load", 1_000_000_000L, 400_000_000L, 3_000_000_000L, 0.1, 0, List.of(new Gauge("cpu", 1, 1)));

    public LoadProbe {
        gauges = List.copyOf(gauges);
        Check.that(path.startsWith("/"), "a path begins with a slash: %s", path);
        Check.positive(everyNanos, "every");
        Check.positive(withinNanos, "within");
        Check.positive(staleAfterNanos, "stale-after");
        Check.that(floor > 0 && floor <= 1, "floor is above 0 and at most 1, not %s", floor);
        Check.notNegative(costNanos, "cost");
        Check.that(!gauges.isEmpty(), "load needs a gauge");
        Check.that(gauges.stream().map(Gauge::name).distinct().count() == gauges.size(), "a gauge is there twice");
    }

    /**
     * A gauge that counts: headroom is {@code max(floor, 1 - u / ceiling) ^ gain}, the least of all gauges.
     *
     * @param name as the load page says it
     * @param ceiling the utilisation at which nothing is left, above 0 and at most 1
     * @param gain how sharply headroom falls, above 0
     */
    public record Gauge(String name, double ceiling, double gain) {
        public Gauge {
            Check.that(ceiling > 0 && ceiling <= 1, "ceiling of %s is above 0 and at most 1, not %s", name, ceiling);
            Check.that(gain > 0, "gain of %s is above 0, not %s", name, gain);
        }
    }
}
