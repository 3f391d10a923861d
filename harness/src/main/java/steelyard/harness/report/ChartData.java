package steelyard.harness.report;

import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.JsonNodeFactory;
import com.fasterxml.jackson.databind.node.ObjectNode;
import com.fasterxml.jackson.databind.node.ValueNode;
import java.math.BigDecimal;
import java.math.RoundingMode;
import java.util.List;
import java.util.function.Predicate;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.RunData.CueRow;
import steelyard.harness.record.RunData.ForecastRow;
import steelyard.harness.record.RunData.PoolRow;
import steelyard.harness.record.RunData.StandingRow;
import steelyard.harness.report.Columns.PerBackend;

/**
 * The figures that the page's charts are drawn from, as JSON that is safe inside a script element.
 *
 * <p>A column is a list, or, where that is shorter, {@code {"runs": [value, count, value, count, ...]}}. Numbers are
 * rounded to what a chart can show; the run folder's CSV files hold them in full.
 */
final class ChartData {
    private static final JsonNodeFactory JSON = JsonNodeFactory.instance;

    private ChartData() {}

    static String json(RunFiles run) throws JsonProcessingException {
        ObjectNode data = JSON.objectNode();
        data.put("lasts", run.run().lasts());
        data.put("played", run.played());
        data.put("ended", run.run().ended());
        data.put("slice", Columns.SECONDS);
        data.put("slices", run.columns().size());
        data.set("pools", words(run.pools()));
        data.set("byLoad", words(pools(run, PoolRow::weighsByLoad)));
        data.set("connections", words(pools(run, PoolRow::passesOctets)));
        data.set("queues", queues(run));
        data.set("cues", cues(run.run().cues()));
        data.set("requests", requests(run.columns()));
        data.set("backends", backends(run));
        if (run.latencies().known()) {
            data.set(
                    "latencies",
                    LatencySteps.json(run.latencies(), run.columns().size()));
        }
        ForecastRow forecast = run.run().forecast();
        if (forecast != null && run.columns().size() > 0) {
            boolean grouped = forecast.rows().stream().anyMatch(row -> row.backends() > 1);
            data.putObject("forecast").put("plays", forecast.bandPlays()).put("grouped", grouped);
            data.set("bands", ChartBands.json(run));
        }
        return new ObjectMapper().writeValueAsString(data).replace("<", "\\u003c");
    }

    private static List<String> pools(RunFiles run, Predicate<PoolRow> which) {
        return run.run().pools().stream().filter(which).map(PoolRow::name).toList();
    }

    /** What waited in the balancer, by pool; of those that let requests wait. */
    private static ObjectNode queues(RunFiles run) {
        ObjectNode queues = JSON.objectNode();
        for (String pool : run.queueing()) {
            queues.set(pool, column(run.run().slices().numbers(RunFiles.queue(pool)), 1));
        }
        return queues;
    }

    private static ArrayNode words(List<String> words) {
        ArrayNode array = JSON.arrayNode();
        words.forEach(array::add);
        return array;
    }

    private static ArrayNode cues(List<CueRow> cues) {
        ArrayNode array = JSON.arrayNode();
        for (CueRow cue : cues) {
            array.addObject()
                    .put("at", cue.at())
                    .put("cue", cue.cue())
                    .put("action", cue.action())
                    .put("by", cue.by());
        }
        return array;
    }

    private static ObjectNode requests(Columns slices) {
        ObjectNode requests = JSON.objectNode();
        requests.set("offered", column(slices.offered(), 0));
        requests.set("ok", column(slices.ok(), 0));
        requests.set("p50", column(slices.p50(), 2));
        requests.set("p95", column(slices.p95(), 2));
        requests.set("p99", column(slices.p99(), 2));
        requests.set("worst", column(slices.worst(), 2));
        requests.set("retries", column(slices.retries(), 0));
        ObjectNode failed = requests.putObject("failed");
        slices.failed().forEach((cause, counts) -> failed.set(cause, column(counts, 0)));
        return requests;
    }

    private static ArrayNode backends(RunFiles run) {
        ArrayNode array = JSON.arrayNode();
        for (int at = 0; at < run.backends().size(); at++) {
            BackendRow backend = run.backends().get(at);
            PerBackend slices = run.columns().perBackend().get(at);
            ObjectNode node = array.addObject();
            node.put("name", backend.name()).put("pool", backend.pool());
            node.set("picked", column(slices.picked(), 0));
            node.set("inFlight", column(slices.inFlight(), 0));
            node.set("waiting", column(slices.waiting(), 0));
            node.set("weight", column(slices.weight(), 3));
            node.set("entitled", column(slices.entitled(), 4));
            node.set("utilisation", column(slices.utilisation(), 3));
            node.set("standing", standing(run, backend.name(), slices.standing()));
            ArrayNode unread = unread(run, backend.name());
            if (!unread.isEmpty()) {
                node.set("unread", unread);
            }
        }
        return array;
    }

    /** Stretches, each from and to a second, in which the weight should have gone by load and did not. */
    private static ArrayNode unread(RunFiles run, String backend) {
        ArrayNode array = JSON.arrayNode();
        for (Readings.Gap gap : Readings.of(run)) {
            if (gap.backend().equals(backend)) {
                array.addArray().add(gap.from()).add(gap.to());
            }
        }
        return array;
    }

    /** The words in turn, each with the second from which it holds; in a forecast those of most plays. */
    private static ArrayNode standing(RunFiles run, String backend, List<String> sampled) {
        if (run.run().forecast() != null) {
            return standing(run.columns().from(), sampled);
        }
        List<StandingRow> changes = run.run().standings().stream()
                .filter(change -> change.backend().equals(backend))
                .toList();
        ArrayNode array = JSON.arrayNode();
        if (!changes.isEmpty()) {
            array.addArray().add(0).add(changes.get(0).from());
        } else if (!sampled.isEmpty()) {
            array.addArray().add(0).add(sampled.get(0));
        }
        changes.forEach(change -> array.addArray().add(change.at()).add(change.to()));
        return array;
    }

    private static ArrayNode standing(double[] from, List<String> sampled) {
        ArrayNode array = JSON.arrayNode();
        for (int slice = 0; slice < from.length; slice++) {
            if (slice == 0 || !sampled.get(slice).equals(sampled.get(slice - 1))) {
                array.addArray().add(rounded(from[slice], 1)).add(sampled.get(slice));
            }
        }
        return array;
    }

    static JsonNode column(double[] values, int decimals) {
        ArrayNode plain = JSON.arrayNode();
        ArrayNode runs = JSON.arrayNode();
        int start = 0;
        for (int at = 0; at < values.length; at++) {
            plain.add(rounded(values[at], decimals));
            boolean last = at + 1 == values.length;
            if (last || Double.compare(values[at], values[at + 1]) != 0) {
                runs.add(rounded(values[at], decimals)).add(at + 1 - start);
                start = at + 1;
            }
        }
        return runs.size() < plain.size() ? JSON.objectNode().set("runs", runs) : plain;
    }

    /** Null, which charts leave open, for what is not a number. */
    private static ValueNode rounded(double value, int decimals) {
        if (!Double.isFinite(value)) {
            return JSON.nullNode();
        }
        BigDecimal rounded = BigDecimal.valueOf(value)
                .setScale(decimals, RoundingMode.HALF_UP)
                .stripTrailingZeros();
        return JSON.numberNode(rounded.scale() < 0 ? rounded.setScale(0) : rounded);
    }
}
