package steelyard.harness.compare;

import java.util.List;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import org.snakeyaml.engine.v2.api.LoadSettings;
import org.snakeyaml.engine.v2.api.lowlevel.Compose;
import org.snakeyaml.engine.v2.exceptions.Mark;
import org.snakeyaml.engine.v2.exceptions.YamlEngineException;
import org.snakeyaml.engine.v2.nodes.MappingNode;
import org.snakeyaml.engine.v2.nodes.Node;
import org.snakeyaml.engine.v2.nodes.NodeTuple;
import org.snakeyaml.engine.v2.nodes.ScalarNode;
import org.snakeyaml.engine.v2.nodes.SequenceNode;

/** The library's nodes of a text that a drill's reader has taken already. */
public final class DrillYaml {
    private static final LoadSettings SETTINGS =
            LoadSettings.builder().setUseMarks(true).build();

    private DrillYaml() {}

    /** The root of a text, or null when there is none that can be read. */
    public static @Nullable Node root(String text) {
        try {
            Optional<Node> root = new Compose(SETTINGS).composeString(text);
            return root.orElse(null);
        } catch (YamlEngineException broken) {
            return null;
        }
    }

    /** The value of a key of a map; null when it is no map or has no such key. */
    public static @Nullable Node value(Node node, String key) {
        for (NodeTuple each : entries(node)) {
            if (key(each).equals(key)) {
                return each.getValueNode();
            }
        }
        return null;
    }

    public static List<NodeTuple> entries(Node node) {
        return node instanceof MappingNode map ? map.getValue() : List.of();
    }

    public static String key(NodeTuple entry) {
        return entry.getKeyNode() instanceof ScalarNode scalar ? scalar.getValue() : "";
    }

    public static List<Node> items(Node node) {
        return node instanceof SequenceNode list ? list.getValue() : List.of();
    }

    /** The text of a single value; null for anything else. */
    public static @Nullable String scalar(@Nullable Node node) {
        return node instanceof ScalarNode scalar ? scalar.getValue() : null;
    }

    /** Whether nothing was written, as in {@code fulmar:}. */
    public static boolean empty(Node node) {
        return node instanceof ScalarNode scalar
                && scalar.getValue().isEmpty()
                && offset(node.getStartMark()) == offset(node.getEndMark());
    }

    /** Where a node begins, in code points from the start of the text. */
    public static int start(Node node) {
        return offset(node.getStartMark());
    }

    public static int end(Node node) {
        return offset(node.getEndMark());
    }

    private static int offset(Optional<Mark> mark) {
        return mark.orElseThrow().getIndex();
    }
}
