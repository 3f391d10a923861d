package steelyard.harness.report;

import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.JsonNodeFactory;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.util.Set;
import java.util.stream.Collectors;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.RunData.PoolRow;
import steelyard.harness.record.Slices;

/** The 5 % and 95 % quantiles over plays that a forecast's charts are shaded between. */
final class ChartBands {
    private ChartBands() {}

    static ObjectNode json(RunFiles run) {
        Slices slices = run.run().slices();
        Set<String> byLoad = run.run().pools().stream()
                .filter(PoolRow::weighsByLoad)
                .map(PoolRow::name)
                .collect(Collectors.toSet());
        ObjectNode bands = JsonNodeFactory.instance.objectNode();
        ObjectNode requests = bands.putObject("requests");
        put(requests, "offered", slices, "offered", 1);
        put(requests, "ok", slices, "ok", 1);
        put(requests, "failed", slices, "failed", 1);
        put(requests, "p50", slices, "p50_ms", 2);
        put(requests, "p95", slices, "p95_ms", 2);
        put(requests, "p99", slices, "p99_ms", 2);
        ObjectNode queues = bands.putObject("queues");
        run.queueing().forEach(pool -> put(queues, pool, slices, RunFiles.queue(pool), 1));
        ArrayNode backends = bands.putArray("backends");
        for (BackendRow row : run.backends()) {
            ObjectNode each = backends.addObject();
            put(each, "share", slices, row.name() + ":share", 4);
            put(each, "inFlight", slices, row.name() + ":in-flight", 1);
            put(each, "utilisation", slices, row.name() + ":utilisation", 3);
            put(each, "weight", slices, row.name() + ":weight", 3);
            if (byLoad.contains(row.pool())) {
                put(each, "entitled", slices, row.name() + ":entitled", 4);
            }
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
