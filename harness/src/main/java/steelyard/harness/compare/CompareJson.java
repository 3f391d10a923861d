package steelyard.harness.compare;

import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.JsonNodeFactory;
import com.fasterxml.jackson.databind.node.ObjectNode;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.record.RunJson;

/** A comparison as JSON. Durations are in seconds; null stands for what there is not. */
public final class CompareJson {
    private static final int FORMAT = 1;

    private CompareJson() {}

    /** The file's text. */
    public static String text(Comparison comparison) {
        ObjectNode root = JsonNodeFactory.instance.objectNode();
        root.put("format", FORMAT);
        side(root.putObject("first"), comparison.first());
        side(root.putObject("second"), comparison.second());
        root.put("margin", comparison.margin())
                .put("errorRate", comparison.errorRate())
                .put("worse", comparison.worse());
        ArrayNode settings = root.putArray("settings");
        for (SettingChange each : comparison.settings()) {
            settings.addObject()
                    .put("setting", each.setting())
                    .put("first", each.first())
                    .put("second", each.second());
        }
        ArrayNode measures = root.putArray("measures");
        comparison.lines().forEach(each -> line(measures.addObject(), each));
        ArrayNode missing = root.putArray("missing");
        comparison.missing().forEach(missing::add);
        return RunJson.text(root);
    }

    private static void side(ObjectNode node, Runs runs) {
        node.put("drill", runs.first().drill()).put("is", runs.words()).put("seeds", runs.seeds());
    }

    private static void line(ObjectNode node, Line line) {
        node.put("text", line.text()).put("expected", line.expected()).put("unit", line.unit());
        number(node, "first", line.first());
        number(node, "second", line.second());
        Difference difference = line.difference();
        if (difference == null) {
            node.putNull("difference").putNull("low").putNull("high").putNull("method");
        } else {
            number(node, "difference", difference.size());
            number(node, "low", difference.low());
            number(node, "high", difference.high());
            node.put("method", difference.method().words());
        }
        node.put("word", line.word().text()).put("note", line.note());
    }

    /** Values are in seconds already, so no unit changes them. */
    private static void number(ObjectNode node, String key, double value) {
        RunJson.putValue(node, key, Unit.NUMBER, value);
    }
}
