package steelyard.harness.tune;

import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.JsonNodeFactory;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.io.IOException;
import java.util.List;
import java.util.Map;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.compare.Direction;
import steelyard.harness.forecast.Held;
import steelyard.harness.forecast.Spread;
import steelyard.harness.record.Csv;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.RunJson;
import steelyard.harness.record.Words;
import steelyard.harness.tune.Result.Axis;
import steelyard.harness.tune.Tuning.Request;
import steelyard.harness.tune.Tuning.Tuned;

/**
 * Writes {@code grid.csv}, a row for each cell, and {@code grid.json}, which also says what was asked for, what would be
 * taken and what rehearsals came to. Durations are in seconds. The same grid gives the same bytes.
 */
public final class GridFiles {
    public static final String CSV = "grid.csv";
    public static final String JSON = "grid.json";

    private static final int FORMAT = 1;

    private GridFiles() {}

    /**
     * Writes both, in place of earlier ones.
     *
     * @param tuned with at least one result
     * @param drill its title
     * @param source the drill's text before any value was changed
     * @param version of Steelyard
     */
    public static void write(
            RunFolder folder, Tuned tuned, List<Confirmed> confirmed, String drill, String source, String version)
            throws IOException {
        folder.replace(CSV, csv(tuned));
        folder.replace(JSON, json(tuned, confirmed, drill, source, version));
    }

    private static String csv(Tuned tuned) {
        StringBuilder text = new StringBuilder("cell");
        tuned.request().grid().variations().forEach(each -> Csv.field(text.append(','), each.path()));
        for (String axis : new String[] {"want", "against"}) {
            for (String column : new String[] {"mean", "median", "low90", "high90", "undefined"}) {
                text.append(',').append(axis).append(':').append(column);
            }
        }
        text.append(",plays,held,fit,mark,taken\n");
        Choice choice = tuned.choice();
        for (int at = 0; at < tuned.results().size(); at++) {
            Result result = tuned.results().get(at);
            text.append(result.cell().number());
            result.cell().values().values().forEach(each -> Csv.field(text.append(','), each));
            axis(text, result.want());
            axis(text, result.against());
            text.append(',').append(result.held().plays());
            text.append(',').append(result.held().held());
            text.append(',').append(result.fit());
            Csv.field(text.append(','), tuned.marks().get(at).word());
            text.append(',')
                    .append(choice.taken().filter(result::equals).isPresent())
                    .append('\n');
        }
        return text.toString();
    }

    private static void axis(StringBuilder text, Axis axis) {
        Spread spread = axis.spread();
        Unit unit = axis.figure().unit();
        ObjectNode numbers = JsonNodeFactory.instance.objectNode();
        RunJson.putValue(numbers, "mean", unit, axis.mean());
        RunJson.putValue(numbers, "median", unit, spread.median());
        RunJson.putValue(numbers, "low90", unit, spread.low90());
        RunJson.putValue(numbers, "high90", unit, spread.high90());
        numbers.forEach(each ->
                text.append(',').append(each.isNull() ? "" : each.decimalValue().toPlainString()));
        text.append(',').append(spread.undefined());
    }

    private static String json(Tuned tuned, List<Confirmed> confirmed, String drill, String source, String version) {
        Request request = tuned.request();
        ObjectNode root = JsonNodeFactory.instance.objectNode();
        root.put("format", FORMAT).put("drill", drill);
        root.put("seed", request.seed()).put("plays", request.plays()).put("hold", request.hold());
        root.put("ended", tuned.complete() ? "complete" : "interrupted");
        root.putObject("versions").put("steelyard", version);
        root.put("quantiles", Spread.METHOD).put("interval", Held.METHOD);
        Result any = tuned.results().get(0);
        aim(root.putObject("want"), request.want(), any.want());
        aim(root.putObject("against"), request.against(), any.against());
        ArrayNode vary = root.putArray("vary");
        for (Variation each : request.grid().variations()) {
            ArrayNode values = vary.addObject().put("path", each.path()).putArray("values");
            each.values().forEach(values::add);
        }
        ArrayNode cells = root.putArray("cells");
        for (int at = 0; at < tuned.results().size(); at++) {
            cell(cells.addObject(), tuned.results().get(at), tuned.marks().get(at));
        }
        choice(root, tuned.choice());
        ArrayNode rehearsed = root.putArray("rehearsed");
        confirmed.forEach(each -> rehearsal(rehearsed.addObject(), each));
        root.put("source", source);
        return RunJson.text(root);
    }

    private static void aim(ObjectNode node, Aim aim, Axis axis) {
        Direction direction = Aim.direction(axis.figure());
        node.put("name", aim.name())
                .put("text", axis.figure().text())
                .put("bound", axis.figure().boundText());
        node.put("unit", Words.of(axis.figure().unit()));
        node.put("better", direction.side().word());
    }

    private static void values(ObjectNode node, Map<String, String> values) {
        values.forEach(node::put);
    }

    private static void cell(ObjectNode node, Result result, Front.Mark mark) {
        node.put("cell", result.cell().number());
        values(node.putObject("values"), result.cell().values());
        spread(node.putObject("want"), result.want());
        spread(node.putObject("against"), result.against());
        node.putObject("held")
                .put("plays", result.held().held())
                .put("of", result.held().plays())
                .put("low", rounded(result.held().low()))
                .put("high", rounded(result.held().high()));
        node.put("fit", result.fit()).put("mark", mark.word());
    }

    /** What an iteration found is not the same to the last digit everywhere. */
    private static double rounded(double share) {
        return StrictMath.rint(share * 1e6) / 1e6;
    }

    private static void spread(ObjectNode node, Axis axis) {
        Unit unit = axis.figure().unit();
        Spread spread = axis.spread();
        RunJson.putValue(node, "mean", unit, axis.mean());
        RunJson.putValue(node, "median", unit, spread.median());
        RunJson.putValue(node, "low90", unit, spread.low90());
        RunJson.putValue(node, "high90", unit, spread.high90());
        RunJson.putValue(node, "low95", unit, spread.low95());
        RunJson.putValue(node, "high95", unit, spread.high95());
        node.put("undefined", spread.undefined());
    }

    private static void choice(ObjectNode root, Choice choice) {
        if (choice.taken().isEmpty()) {
            root.putNull("taken");
        } else {
            Cell cell = choice.taken().get().cell();
            values(root.putObject("taken").put("cell", cell.number()).putObject("values"), cell.values());
        }
        root.put("reason", choice.reason());
        ArrayNode alike = root.putArray("alike");
        choice.alike().forEach(each -> alike.add(each.cell().number()));
    }

    private static void rehearsal(ObjectNode node, Confirmed each) {
        node.put("cell", each.result().cell().number());
        node.put("seed", each.seed()).put("folder", each.folder()).put("fit", each.fit());
        measured(node.putObject("want"), each.result().want(), each.want(), each.wantInside());
        measured(node.putObject("against"), each.result().against(), each.against(), each.againstInside());
    }

    private static void measured(ObjectNode node, Axis axis, double value, boolean inside) {
        RunJson.putValue(node, "value", axis.figure().unit(), value);
        RunJson.putValue(node, "low95", axis.figure().unit(), axis.spread().low95());
        RunJson.putValue(node, "high95", axis.figure().unit(), axis.spread().high95());
        node.put("inside", inside);
    }
}
