package steelyard.harness.forecast;

import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.JsonNodeFactory;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.record.Cast;
import steelyard.harness.record.RunHead;
import steelyard.harness.record.RunJson;
import steelyard.harness.record.Words;

/**
 * {@code run.json} and {@code verdict.json} of a forecast. Beside what a rehearsal's hold there is {@code forecast}: plays
 * and how they were counted; and for each measure {@code held} and {@code spread}; its {@code value} is the median.
 */
final class ForecastJson {
    private ForecastJson() {}

    /** @param forecast null while it goes on, or when nothing was played */
    static String run(
            RunHead head, Series series, double hold, Bands bands, String ended, @Nullable Forecast forecast) {
        ObjectNode run = RunJson.head(head, new Cast(series.drill()), ended);
        putForecast(run.putObject("forecast"), series, hold, bands, forecast);
        if (forecast == null) {
            run.putNull("verdict");
        } else {
            RunJson.putVerdict(run, forecast.met(), forecast.fit(), forecast.text());
        }
        putAll(run.putArray("expectations"), forecast == null ? List.of() : forecast.expectations());
        putAll(run.putArray("measures"), forecast == null ? List.of() : forecast.measures());
        RunJson.putChecks(run, forecast == null ? List.of() : forecast.checks());
        run.put("source", head.source());
        return RunJson.text(run);
    }

    private static void putForecast(
            ObjectNode node, Series series, double hold, Bands bands, @Nullable Forecast forecast) {
        node.put("plays", forecast == null ? 0 : forecast.played().plays().size());
        node.put("wanted", series.plays());
        Digits.put(node, "hold", Unit.SHARE, hold);
        Digits.put(node, "hop", Unit.DURATION, series.transport().hopNanos());
        node.put("quantiles", Spread.METHOD);
        node.put("interval", Held.METHOD);
        node.put("bandPlays", bands.plays());
        ArrayNode rows = node.putArray("rows");
        for (Group group : bands.groups()) {
            rows.addObject()
                    .put("name", group.name())
                    .put("pool", group.pool())
                    .put("backends", group.members().size());
        }
    }

    private static void putAll(ArrayNode array, List<Foreseen> all) {
        for (Foreseen each : all) {
            put(array.addObject(), each);
        }
    }

    private static void put(ObjectNode node, Foreseen each) {
        Figure figure = each.figure();
        Unit unit = figure.unit();
        node.put("measure", figure.measure().word()).put("of", figure.of()).put("text", figure.text());
        if (figure.bound() != null) {
            node.put("bound", figure.boundText());
        }
        node.put("measured", each.measured());
        Digits.put(node, "value", unit, each.spread().median());
        if (figure.bound() != null) {
            RunJson.putValue(node, "least", unit, figure.bound().least());
            RunJson.putValue(node, "most", unit, figure.bound().most());
        }
        node.put("unit", Words.of(unit));
        if (figure.bound() != null) {
            node.put("met", each.met());
        }
        node.put("why", each.note());
        putHeld(node, each.held());
        putSpread(node.putObject("spread"), unit, each.spread());
    }

    private static void putHeld(ObjectNode node, @Nullable Held held) {
        if (held != null) {
            ObjectNode in = node.putObject("held").put("plays", held.held());
            Digits.put(in, "share", Unit.SHARE, held.share());
            // What an iteration found is not the same to the last digit everywhere.
            Digits.put(in, "low", Unit.SHARE, StrictMath.rint(held.low() * 1e6) / 1e6);
            Digits.put(in, "high", Unit.SHARE, StrictMath.rint(held.high() * 1e6) / 1e6);
        }
    }

    private static void putSpread(ObjectNode node, Unit unit, Spread spread) {
        node.put("undefined", spread.undefined());
        Digits.put(node, "low90", unit, spread.low90());
        Digits.put(node, "high90", unit, spread.high90());
        Digits.put(node, "low95", unit, spread.low95());
        Digits.put(node, "high95", unit, spread.high95());
        Digits.put(node, "least", unit, spread.least());
        Digits.put(node, "most", unit, spread.most());
    }

    /** {@code verdict.json}. */
    static String verdict(RunHead head, Forecast forecast) {
        ObjectNode node = JsonNodeFactory.instance.objectNode();
        node.put("drill", head.drill().name());
        node.put("stage", head.stage());
        node.put("plays", forecast.played().plays().size());
        Digits.put(node, "hold", Unit.SHARE, forecast.hold());
        node.put("met", forecast.met());
        node.put("fit", forecast.fit());
        ArrayNode expectations = node.putArray("expectations");
        for (Foreseen each : forecast.expectations()) {
            ObjectNode one = expectations
                    .addObject()
                    .put("measure", each.figure().measure().word())
                    .put("of", each.figure().of())
                    .put("bound", each.figure().boundText())
                    .put("measured", each.measured());
            Digits.put(
                    one,
                    "held",
                    Unit.SHARE,
                    each.held() == null ? 1 : each.held().share());
            one.put("met", each.met());
        }
        return RunJson.text(node);
    }
}
