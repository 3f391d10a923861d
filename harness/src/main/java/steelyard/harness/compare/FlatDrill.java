package steelyard.harness.compare;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;
import org.snakeyaml.engine.v2.nodes.Node;
import org.snakeyaml.engine.v2.nodes.NodeTuple;

/** The text of a drill as paths and single values; items of lists go by what names them, so that one more moves none. */
final class FlatDrill {
    private static final List<String> NAMES = List.of("as", "to");
    private static final List<String> BOUNDS = List.of("at-most", "at-least", "between");

    private final Map<String, String> values = new LinkedHashMap<>();

    private FlatDrill() {}

    /** In the order of the text; empty for a text that cannot be read. */
    static Map<String, String> of(String source) {
        FlatDrill flat = new FlatDrill();
        Node root = DrillYaml.root(source);
        if (root != null) {
            flat.add("", root);
        }
        return flat.values;
    }

    private void add(String path, Node node) {
        String scalar = DrillYaml.scalar(node);
        if (scalar != null) {
            put(path, scalar.strip());
            return;
        }
        for (NodeTuple each : DrillYaml.entries(node)) {
            add(path.isEmpty() ? DrillYaml.key(each) : path + "." + DrillYaml.key(each), each.getValueNode());
        }
        List<Node> items = DrillYaml.items(node);
        for (int at = 0; at < items.size(); at++) {
            addItem(path, items.get(at), at + 1);
        }
    }

    private void addItem(String path, Node item, int number) {
        if (path.equals("expect")) {
            put(path + "." + line(item, false), line(item, true));
            return;
        }
        String name = name(item);
        add(path + "." + (name == null ? String.valueOf(number) : name), item);
    }

    private static @Nullable String name(Node item) {
        for (String key : NAMES) {
            Node node = DrillYaml.value(item, key);
            String name = node == null ? null : DrillYaml.scalar(node);
            if (name != null) {
                return name;
            }
        }
        return null;
    }

    /** An expectation on one line: its bound alone, or all but its bound. */
    private static String line(Node item, boolean bound) {
        return DrillYaml.entries(item).stream()
                .filter(each -> BOUNDS.contains(DrillYaml.key(each)) == bound)
                .map(each -> (DrillYaml.key(each).equals("measure") ? "" : DrillYaml.key(each) + " ")
                        + flow(each.getValueNode()))
                .collect(Collectors.joining(" "));
    }

    private static String flow(Node node) {
        String scalar = DrillYaml.scalar(node);
        if (scalar != null) {
            return scalar;
        }
        if (!DrillYaml.items(node).isEmpty()) {
            return DrillYaml.items(node).stream().map(FlatDrill::flow).collect(Collectors.joining(", ", "[", "]"));
        }
        return DrillYaml.entries(node).stream()
                .map(each -> DrillYaml.key(each) + ": " + flow(each.getValueNode()))
                .collect(Collectors.joining(", ", "{", "}"));
    }

    /** Two of one name are told apart by a number. */
    private void put(String path, String value) {
        String free = path;
        for (int number = 2; values.containsKey(free); number++) {
            free = path + " (" + number + ")";
        }
        values.put(free, value);
    }
}
