package steelyard.drills.read;

import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Target;

/**
 * A target as the file names it.
 *
 * @param names at least one; more than one only for backends
 */
record TargetDraft(Place place, Target.Kind kind, List<Placed<String>> names) {
    private static final Quantity<String> NAME = Names.some("a name", "fulmar");

    /** Reads the target behind a key; null when a problem was noted or the key is absent. */
    static @Nullable TargetDraft read(Fields fields, String key) {
        Node node = fields.node(key);
        Problems problems = fields.problems();
        if (node == null) {
            return null;
        }
        if (node instanceof Node.Entries) {
            return map(Fields.open(node, Keys.TARGET, problems), node.place());
        }
        List<Node> nodes = node instanceof Node.Items items ? items.nodes() : List.of(node);
        List<Placed<String>> names = new ArrayList<>();
        for (Node one : nodes) {
            String name = NAME.read(one, key, problems);
            if (name != null && names.stream().anyMatch(there -> there.value().equals(name))) {
                problems.notice(one.place(), "'" + name + "' is named twice", "keep one");
            }
            if (name != null) {
                names.add(new Placed<>(one.place(), name));
            }
        }
        if (nodes.isEmpty()) {
            problems.add(node.place(), "'" + key + "' names nothing", "write the name of a backend");
        }
        return names.isEmpty() ? null : new TargetDraft(node.place(), Target.Kind.BACKENDS, names);
    }

    private static @Nullable TargetDraft map(Fields fields, Place place) {
        List<String> given = fields.given();
        if (given.size() != 1) {
            if (!fields.odd()) {
                fields.problems()
                        .add(place, "a target is one of host, zone and pool", "write one, such as {host: north-quay}");
            }
            return null;
        }
        String word = given.get(0);
        String name = fields.read(word, NAME);
        if (name == null) {
            return null;
        }
        Target.Kind kind = switch (word) {
            case "host" -> Target.Kind.HOST;
            case "zone" -> Target.Kind.ZONE;
            default -> Target.Kind.POOL;
        };
        return new TargetDraft(place, kind, List.of(new Placed<>(fields.valuePlace(word), name)));
    }
}
