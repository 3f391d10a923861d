package steelyard.drills.read;

import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Where the keys of a drill stand, for what is found wrong with one after it was read: a file that it names, or the
 * machine at hand. Immutable; any thread may call.
 *
 * <p>A path names the keys from the top of the file down, {@code "stage", "pools", "seats"}; a number stands for the
 * entry of a list, from 0.
 */
public final class DrillPlaces {
    private final String name;
    private final @Nullable Node root;

    private DrillPlaces(String name, @Nullable Node root) {
        this.name = name;
        this.root = root;
    }

    /** The places of a text under a name for messages; a text that is no YAML has none. */
    public static DrillPlaces of(String name, String text) {
        return new DrillPlaces(name, TreeBuilder.build(text, new Problems(name)));
    }

    /** Whether the file has that key. */
    public boolean has(String... path) {
        Node node = root;
        for (String step : path) {
            Node.Entry entry = node == null ? null : entry(node, step);
            node = entry == null ? null : entry.value();
        }
        return node != null;
    }

    /** A problem at a key, or at what there is of the path to it. */
    public Problem problem(String message, String remedy, String... path) {
        return at(Problem.Severity.PROBLEM, message, remedy, path);
    }

    /** A notice at a key, or at what there is of the path to it. */
    public Problem notice(String message, String remedy, String... path) {
        return at(Problem.Severity.NOTICE, message, remedy, path);
    }

    private Problem at(Problem.Severity severity, String message, String remedy, String... path) {
        Place place = root == null ? Place.FILE : root.place();
        Node node = root;
        for (String step : path) {
            Node.Entry entry = node == null ? null : entry(node, step);
            node = entry == null ? null : entry.value();
            place = entry == null ? place : entry.place();
        }
        return new Problem(severity, name, place.line(), place.column(), message, remedy);
    }

    private static Node.@Nullable Entry entry(Node node, String step) {
        if (node instanceof Node.Items items) {
            List<Node> nodes = items.nodes();
            Integer index = step.length() > 9 ? null : number(step);
            return index == null || index >= nodes.size()
                    ? null
                    : new Node.Entry(nodes.get(index).place(), step, nodes.get(index));
        }
        return node instanceof Node.Entries map
                ? map.list().stream()
                        .filter(entry -> entry.key().equals(step))
                        .findFirst()
                        .orElse(null)
                : null;
    }

    private static @Nullable Integer number(String step) {
        return !step.isEmpty() && step.chars().allMatch(c -> c >= '0' && c <= '9') ? Integer.valueOf(step) : null;
    }
}
