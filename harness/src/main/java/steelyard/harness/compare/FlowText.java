package steelyard.harness.compare;

import java.util.List;
import java.util.regex.Pattern;
import java.util.stream.Collectors;
import org.snakeyaml.engine.v2.common.ScalarStyle;
import org.snakeyaml.engine.v2.nodes.MappingNode;
import org.snakeyaml.engine.v2.nodes.Node;
import org.snakeyaml.engine.v2.nodes.NodeTuple;
import org.snakeyaml.engine.v2.nodes.ScalarNode;
import org.snakeyaml.engine.v2.nodes.SequenceNode;

/** Nodes as a text of one line that is read as what they were composed of. */
final class FlowText {
    /** What may stand without quotes between braces. */
    private static final Pattern BARE = Pattern.compile("[\\p{L}\\p{N}/.+<(-]([\\p{L}\\p{N} /.+%()_-]*[^ ])?");

    private FlowText() {}

    static String of(Node node) {
        if (node instanceof ScalarNode scalar) {
            return scalar(scalar);
        }
        if (node instanceof SequenceNode list) {
            return list.getValue().stream().map(FlowText::of).collect(Collectors.joining(", ", "[", "]"));
        }
        List<NodeTuple> entries = ((MappingNode) node).getValue();
        return entries.stream()
                .map(each -> of(each.getKeyNode()) + ": " + of(each.getValueNode()))
                .collect(Collectors.joining(", ", "{", "}"));
    }

    private static String scalar(ScalarNode scalar) {
        String value = scalar.getValue();
        boolean plain = scalar.getScalarStyle() == ScalarStyle.PLAIN;
        if (plain && (value.isEmpty() || BARE.matcher(value).matches())) {
            return value;
        }
        return '"' + value.replace("\\", "\\\\").replace("\"", "\\\"").replace("\n", "\\n") + '"';
    }
}
