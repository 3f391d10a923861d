package steelyard.harness.report;

import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.JsonNodeFactory;
import com.fasterxml.jackson.databind.node.ObjectNode;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.Slices;

/** The 5 % and 95 % quantiles over plays that a forecast's charts are shaded between. */
final class ChartBands {
    private ChartBands() {}

    static ObjectNode json(RunFiles run) {
        Slices slices = run.run().slices();
        ObjectNode bands = JsonNodeFactory.instance.objectNode();
        ObjectNode requests = bands.putObject("requests");
        put(requests, "offered", slices, "offered", 1);
        put(requests, "ok", slices, "ok", 1);
        put(requests, "failed", slices, "failed", 1);
        put(requests, "p50", slices, "p50_ms", 2);
        put(requests, "p95", slices, "p95_ms", 2);
        put(requests, "p99", slices, "p99_ms", 2);
        ArrayNode backends = bands.putArray("backends");
        for (BackendRow row : run.backends()) {
            ObjectNode each = backends.addObject();
            put(each, "share", slices, row.name() + ":share", 4);
            put(each, "inFlight", slices, row.name() + ":in-flight", 1);
            put(each, "utilisation", slices, row.name() + ":utilisation", 3);
            put(each, "weight", slices, row.name() + ":weight", 3);
        }
        return bands;
    }

    private static void put(ObjectNode node, String name, Slices slices, String column, int decimals) {
        ObjectNode band = node.putObject(name);
        band.set("median", ChartData.column(slices.numbers(column), decimals));
        band.set("low", ChartData.column(slices.numbers(column + ":low"), decimals));
        band.set("high", ChartData.column(slices.numbers(column + ":high"), decimals));
    }
}
