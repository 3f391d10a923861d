package steelyard.harness.compare;

import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;
import org.snakeyaml.engine.v2.nodes.MappingNode;
import org.snakeyaml.engine.v2.nodes.Node;
import org.snakeyaml.engine.v2.nodes.NodeTuple;
import org.snakeyaml.engine.v2.nodes.NodeType;

/** The text of a drill as paths and single values; items of lists go by what names them, so that one more moves none. */
final class FlatDrill {
    private static final List<String> NAMES = List.of("as", "to");
    private static final List<String> BOUNDS = List.of("at-most", "at-least", "between");

    private final Map<String, String> values = new LinkedHashMap<>();
    private final Map<String, Entry> entries = new LinkedHashMap<>();
    private final @Nullable DrillMeaning meaning;

    /** Empty for a text that cannot be read. */
    FlatDrill(String source) {
        Node root = DrillYaml.root(source);
        meaning = root == null ? null : new DrillMeaning(source, root);
        if (root != null) {
            add("", root);
        }
    }

    /** An entry of a map, which stands at a path. */
    private record Entry(MappingNode map, NodeTuple tuple) {
        Node value() {
            return tuple.getValueNode();
        }
    }

    /** Single values by path, in the order of the text. */
    Map<String, String> values() {
        return Collections.unmodifiableMap(values);
    }

    /**
     * Whether what two texts have at a path is the same when it is read: a default that one of them writes down, or one
     * value in two spellings.
     */
    static boolean sameAt(String path, FlatDrill one, FlatDrill two) {
        for (int end = path.indexOf('.'); ; end = path.indexOf('.', end + 1)) {
            String upTo = end < 0 ? path : path.substring(0, end);
            Entry first = one.entries.get(upTo);
            Entry second = two.entries.get(upTo);
            if (first == null ^ second == null) {
                return first == null ? two.sameWithout(second) : one.sameWithout(first);
            }
            if (first != null && second != null && !nested(first.value(), second.value())) {
                return one.sameWith(first, second.value());
            }
            if (end < 0) {
                return false;
            }
        }
    }

    private static boolean nested(Node one, Node two) {
        return one.getNodeType() == two.getNodeType() && one.getNodeType() != NodeType.SCALAR;
    }

    private boolean sameWithout(@Nullable Entry entry) {
        return entry != null && meaning != null && meaning.sameWithout(entry.map(), entry.tuple());
    }

    private boolean sameWith(Entry entry, Node value) {
        return meaning != null && meaning.sameWith(entry.map(), entry.tuple(), value);
    }

    private void add(String path, Node node) {
        String scalar = DrillYaml.scalar(node);
        if (scalar != null) {
            put(path, scalar.strip());
            return;
        }
        for (NodeTuple each : DrillYaml.entries(node)) {
            String below = path.isEmpty() ? DrillYaml.key(each) : path + "." + DrillYaml.key(each);
            entries.putIfAbsent(below, new Entry((MappingNode) node, each));
            add(below, each.getValueNode());
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
