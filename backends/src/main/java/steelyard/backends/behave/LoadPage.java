package steelyard.backends.behave;

import java.util.HashSet;
import java.util.List;
import java.util.Set;

/**
 * The page on which a backend shows its load. Immutable, any thread.
 *
 * @param costNanos worker time that one reading takes, 0 to a day; at 0 it is answered at once, past the queue
 * @param gauges what it shows besides {@link Gauge#CPU}, each name once
 */
public record LoadPage(long costNanos, List<Gauge> gauges) {
    public LoadPage {
        if (costNanos < 0 || costNanos > ServiceTime.LONGEST_NANOS) {
            throw new IllegalArgumentException("a reading costs 0 to a day, but got " + costNanos + " ns");
        }
        gauges = List.copyOf(gauges);
        Set<String> names = new HashSet<>();
        for (Gauge gauge : gauges) {
            if (!names.add(gauge.name())) {
                throw new IllegalArgumentException("gauge " + gauge.name() + " is there twice");
            }
        }
    }
}
