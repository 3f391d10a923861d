package steelyard.harness.tune;

import org.snakeyaml.engine.v2.common.FlowStyle;
import org.snakeyaml.engine.v2.nodes.MappingNode;
import org.snakeyaml.engine.v2.nodes.Node;
import steelyard.harness.compare.DrillYaml;

/**
 * A stretch of a text that a value takes the place of.
 *
 * @param begin first character
 * @param end behind the last one; the same as {@code begin} where nothing stood
 * @param before what is written in front of the value
 * @param after what is written behind it
 */
record Spot(int begin, int end, String before, String after) {

    /** In place of a value. An anchor in front of it is kept. */
    static Spot replacing(String text, Node value) {
        int begin = at(text, DrillYaml.start(value));
        int end = at(text, DrillYaml.end(value));
        if (begin == end) {
            return new Spot(begin, end, " ", "");
        }
        boolean block = value instanceof MappingNode map && map.getFlowStyle() == FlowStyle.BLOCK;
        int last = block ? trimmed(text, begin, end) : end;
        return new Spot(behindAnchor(text, begin), last, "", "");
    }

    /** As a first entry of a map. */
    static Spot adding(String text, Node map, String key) {
        int begin = at(text, DrillYaml.start(map));
        if (DrillYaml.empty(map)) {
            return new Spot(begin, begin, " {" + key + ": ", "}");
        }
        MappingNode entries = (MappingNode) map;
        if (entries.getFlowStyle() == FlowStyle.FLOW) {
            int inside = text.indexOf('{', begin) + 1;
            return new Spot(inside, inside, key + ": ", entries.getValue().isEmpty() ? "" : ", ");
        }
        Node first = entries.getValue().get(0).getKeyNode();
        int place = at(text, DrillYaml.start(first));
        int column = first.getStartMark().orElseThrow().getColumn();
        return new Spot(place, place, key + ": ", "\n" + " ".repeat(column));
    }

    String put(String text, String value) {
        return text.substring(0, begin) + before + value + after + text.substring(end);
    }

    private static int behindAnchor(String text, int begin) {
        int at = begin;
        if (text.charAt(at) == '&') {
            while (!Character.isWhitespace(text.charAt(at))) {
                at++;
            }
            while (Character.isWhitespace(text.charAt(at))) {
                at++;
            }
        }
        return at;
    }

    /** A block ends where the next thing begins; what is between stays. */
    private static int trimmed(String text, int begin, int end) {
        int at = end;
        while (at > begin && Character.isWhitespace(text.charAt(at - 1))) {
            at--;
        }
        return at;
    }

    private static int at(String text, int codePoints) {
        return text.offsetByCodePoints(0, codePoints);
    }
}
