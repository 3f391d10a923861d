package steelyard.harness.compare;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import org.snakeyaml.engine.v2.nodes.MappingNode;
import org.snakeyaml.engine.v2.nodes.Node;
import org.snakeyaml.engine.v2.nodes.NodeTuple;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;

/**
 * Whether a change of a drill's text changes the drill that is read. A text that cannot be read by itself, such as one
 * that names a trace, says of no change that it means nothing. One thread.
 */
final class DrillMeaning {
    private final Node root;
    private final @Nullable Drill drill;

    /** @param root of the text */
    DrillMeaning(String source, Node root) {
        this.root = root;
        drill = read(source).orElse(null);
    }

    private static Optional<Drill> read(String text) {
        return DrillReader.read("drill", text).value();
    }

    /** Whether an entry of a map only says what holds without it. */
    boolean sameWithout(MappingNode map, NodeTuple entry) {
        List<NodeTuple> others = new ArrayList<>(map.getValue());
        others.remove(entry);
        return same(map, others);
    }

    /** Whether an entry of a map would say the same with another value. */
    boolean sameWith(MappingNode map, NodeTuple entry, Node value) {
        List<NodeTuple> changed = new ArrayList<>(map.getValue());
        changed.set(changed.indexOf(entry), new NodeTuple(entry.getKeyNode(), value));
        return same(map, changed);
    }

    private boolean same(MappingNode map, List<NodeTuple> entries) {
        List<NodeTuple> before = map.getValue();
        map.setValue(entries);
        try {
            return drill != null
                    && read(FlowText.of(root)).filter(drill::equals).isPresent();
        } finally {
            map.setValue(before);
        }
    }
}
