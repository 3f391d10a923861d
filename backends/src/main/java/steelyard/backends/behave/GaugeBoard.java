package steelyard.backends.behave;

import java.util.Collections;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Change.Fill;
import steelyard.backends.behave.Change.Load;

/**
 * What the load page of a backend shows: its own gauges, and over them what faults have set. A gauge that only a fault has
 * named is shown while the fault lasts.
 */
final class GaugeBoard {

    private final @Nullable LoadPage page;
    private final Map<String, Double> loaded = new HashMap<>();
    private @Nullable Double filled;

    GaugeBoard(@Nullable LoadPage page) {
        this.page = page;
    }

    /** Of {@code load} and {@code fill} on one gauge the later one holds. */
    void load(Load load) {
        loaded.put(load.gauge(), load.to());
        if (load.gauge().equals(Gauge.DISK)) {
            filled = null;
        }
    }

    void fill(Fill fill) {
        filled = fill.to();
        loaded.remove(Gauge.DISK);
    }

    void endLoads() {
        loaded.clear();
    }

    void endFill() {
        filled = null;
    }

    /**
     * Every gauge by name, each 0..1: cpu, then those of the page in their order, then those that only a fault has named, in
     * order of name.
     *
     * @param cpu busy share of the workers over the last second
     * @param held requests in service and waiting
     */
    Map<String, Double> values(double cpu, int held) {
        Map<String, Double> values = new LinkedHashMap<>();
        values.put(Gauge.CPU, cpu);
        if (page != null) {
            page.gauges().forEach(gauge -> values.put(gauge.name(), gauge.value(held)));
        }
        loaded.entrySet().stream()
                .sorted(Map.Entry.comparingByKey())
                .forEach(set -> values.put(set.getKey(), set.getValue()));
        if (filled != null) {
            values.put(Gauge.DISK, filled);
        }
        return Collections.unmodifiableMap(values);
    }
}
