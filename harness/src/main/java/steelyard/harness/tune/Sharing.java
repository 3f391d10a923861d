package steelyard.harness.tune;

import java.util.IdentityHashMap;
import java.util.Map;
import org.snakeyaml.engine.v2.nodes.Node;
import org.snakeyaml.engine.v2.nodes.NodeTuple;
import steelyard.harness.compare.DrillYaml;

/** Which nodes of a text are reached on more than one way, through aliases. */
final class Sharing {
    private final Map<Node, Integer> ways = new IdentityHashMap<>();

    Sharing(Node root) {
        count(root);
    }

    /** Below a node that was counted already nothing is counted again, so that aliases of aliases cost nothing. */
    private void count(Node node) {
        if (ways.merge(node, 1, Integer::sum) > 1) {
            return;
        }
        DrillYaml.items(node).forEach(this::count);
        for (NodeTuple each : DrillYaml.entries(node)) {
            count(each.getValueNode());
        }
    }

    boolean shared(Node node) {
        return ways.getOrDefault(node, 0) > 1;
    }
}
