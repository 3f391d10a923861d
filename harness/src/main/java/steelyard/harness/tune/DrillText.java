package steelyard.harness.tune;

import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import org.snakeyaml.engine.v2.nodes.Node;
import steelyard.harness.compare.DrillYaml;

/**
 * The text of a drill, in which a setting named by its path can be given another value. What is not named stays as it
 * was written, so that the drill's reader checks the new text as it checks any other.
 *
 * <p>A path is words with points between them. Its first word is looked for in this order:
 *
 * <ol>
 *   <li>{@code stage}, {@code traffic}, {@code cues} or {@code lasts}: the path goes from the top of the drill, as in
 *       {@code stage.pools.seats.probe.every} or {@code traffic.rate};
 *   <li>the name of a pool: {@code seats.probe.every};
 *   <li>the name of a backend: {@code fulmar.weight};
 *   <li>a key of pools: {@code probe.every} is meant in every pool in which {@code probe} is written as a map.
 * </ol>
 *
 * <p>The last word may be missing in the map that the rest of the path leads to; then it is added there. Maps that are
 * missing are not added. In a list, the next word picks the items whose {@code to} or {@code as} it is, or that of that
 * number from 1; otherwise all items are meant.
 */
final class DrillText {
    private final String text;
    private final @Nullable Node root;

    /** @param text of a drill that was read without problems */
    DrillText(String text) {
        this.text = text;
        root = DrillYaml.root(text);
    }

    /**
     * The text with a setting changed.
     *
     * @param value as a drill writes it, on one line
     * @throws TuneRefused when the path leads nowhere, or where a change would reach further than the path says
     */
    String with(String path, String value) throws TuneRefused {
        checkValue(path, value);
        List<Spot> spots = new ArrayList<>(spots(path));
        spots.sort((one, other) -> Integer.compare(other.begin(), one.begin()));
        String changed = text;
        for (Spot spot : spots) {
            changed = spot.put(changed, value);
        }
        return changed;
    }

    private static void checkValue(String path, String value) throws TuneRefused {
        Node alone = DrillYaml.root("[" + value + "\n]");
        boolean one = alone != null && DrillYaml.items(alone).size() == 1;
        if (!one || value.lines().count() != 1 || value.contains(" #") || value.startsWith("#")) {
            throw new TuneRefused("--vary " + path + ": '" + value + "' is not one value of a drill");
        }
    }

    private List<Spot> spots(String path) throws TuneRefused {
        if (root == null) {
            throw new TuneRefused("--vary " + path + ": the drill is not YAML");
        }
        PathWalk walk = new PathWalk(path, text, root);
        walk.go();
        if (walk.spots().isEmpty()) {
            throw new TuneRefused("--vary " + path + ": " + walk.nowhere());
        }
        return walk.spots();
    }
}
