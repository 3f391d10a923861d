package steelyard.backends.stub;

import io.micrometer.core.instrument.Gauge;
import io.micrometer.core.instrument.Meter;
import io.micrometer.prometheusmetrics.PrometheusConfig;
import io.micrometer.prometheusmetrics.PrometheusMeterRegistry;
import java.nio.charset.StandardCharsets;
import java.util.HashMap;
import java.util.Iterator;
import java.util.Map;

/**
 * The load page of a backend in OpenMetrics text: one gauge {@code load_ratio}, with a label for the name that it has at the
 * backend. The registry comes into being with the first page. One thread.
 */
final class LoadText {

    static final String OPEN_METRICS = "application/openmetrics-text; version=1.0.0; charset=utf-8";

    private final PrometheusMeterRegistry registry = new PrometheusMeterRegistry(PrometheusConfig.DEFAULT);
    private final Map<String, Meter> meters = new HashMap<>();
    private final Map<String, Double> shown = new HashMap<>();

    /** The page that shows these values. */
    byte[] page(Map<String, Double> gauges) {
        forgetAllBut(gauges);
        shown.putAll(gauges);
        gauges.keySet().forEach(name -> meters.computeIfAbsent(name, this::register));
        return registry.scrape(OPEN_METRICS).getBytes(StandardCharsets.UTF_8);
    }

    /** A gauge that only a fault had named goes with the fault. */
    private void forgetAllBut(Map<String, Double> gauges) {
        for (Iterator<Map.Entry<String, Meter>> each = meters.entrySet().iterator(); each.hasNext(); ) {
            Map.Entry<String, Meter> one = each.next();
            if (!gauges.containsKey(one.getKey())) {
                registry.remove(one.getValue());
                shown.remove(one.getKey());
                each.remove();
            }
        }
    }

    private Meter register(String name) {
        return Gauge.builder("load", shown, values -> values.getOrDefault(name, Double.NaN))
                .baseUnit("ratio")
                .description("Utilisation of the backend, 0 to 1, by gauge")
                .tag("gauge", name)
                .register(registry);
    }
}
