package steelyard.harness.tune;

import java.util.ArrayList;
import java.util.Collections;
import java.util.IdentityHashMap;
import java.util.List;
import java.util.Set;
import java.util.TreeSet;
import org.jspecify.annotations.Nullable;
import org.snakeyaml.engine.v2.nodes.MappingNode;
import org.snakeyaml.engine.v2.nodes.Node;
import org.snakeyaml.engine.v2.nodes.NodeTuple;
import steelyard.drills.read.NearWord;
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
    private static final Set<String> TOP = Set.of("stage", "traffic", "cues", "lasts");
    private static final Set<String> NO_SETTINGS = Set.of("drill", "about", "expect");
    private static final String PLAIN_KEY = "[A-Za-z0-9%_-]+";

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
        Walk walk = new Walk(path, root);
        walk.go();
        if (walk.spots.isEmpty()) {
            throw new TuneRefused("--vary " + path + ": " + walk.nowhere());
        }
        return walk.spots;
    }

    /** Follows one path through the drill. */
    private final class Walk {
        private final String path;
        private final List<Spot> spots = new ArrayList<>();
        private final Set<Node> reached = Collections.newSetFromMap(new IdentityHashMap<>());
        /** Words that could have stood where the path went wrong. */
        private final Set<String> known = new TreeSet<>();

        private String wrong = "";
        private @Nullable String single;
        /** Set once the path has picked one of several places: then no alias may lead out of it. */
        private @Nullable Sharing only;

        private final Node top;

        Walk(String path, Node top) {
            this.path = path;
            this.top = top;
        }

        void go() throws TuneRefused {
            String first = word(path);
            if (NO_SETTINGS.contains(first)) {
                throw new TuneRefused("--vary " + path + ": '" + first
                        + "' is no setting of the stage or its traffic; vary one of those, such as probe.every");
            }
            if (TOP.contains(first)) {
                follow(top, path);
                return;
            }
            List<NodeTuple> pools = pools();
            if (fromNamed(pools)) {
                return;
            }
            for (NodeTuple pool : pools) {
                follow(pool.getValueNode(), path);
            }
            if (spots.isEmpty()) {
                known.addAll(TOP);
                pools.forEach(pool -> known.add(DrillYaml.key(pool)));
                backends(pools).forEach(backend -> known.add(DrillYaml.key(backend)));
            }
        }

        private List<NodeTuple> pools() {
            Node stage = DrillYaml.value(top, "stage");
            Node pools = stage == null ? null : DrillYaml.value(stage, "pools");
            return pools == null ? List.of() : DrillYaml.entries(pools);
        }

        private List<NodeTuple> backends(List<NodeTuple> pools) {
            List<NodeTuple> backends = new ArrayList<>();
            for (NodeTuple pool : pools) {
                Node named = DrillYaml.value(pool.getValueNode(), "backends");
                backends.addAll(named == null ? List.of() : DrillYaml.entries(named));
            }
            return backends;
        }

        /** A pool or a backend that the path begins with; names may hold points, so the longest counts. */
        private boolean fromNamed(List<NodeTuple> pools) throws TuneRefused {
            NodeTuple named = longest(pools, path);
            if (named == null) {
                named = longest(backends(pools), path);
            }
            if (named == null) {
                return false;
            }
            String name = DrillYaml.key(named);
            if (path.equals(name)) {
                throw new TuneRefused(
                        "--vary " + path + " names no setting; write which of its settings, as in " + path + ".weight");
            }
            only = new Sharing(top);
            follow(named.getValueNode(), path.substring(name.length() + 1));
            return true;
        }

        private void follow(Node node, String rest) throws TuneRefused {
            checkAlone(node);
            if (!DrillYaml.items(node).isEmpty()) {
                followItems(node, rest);
                return;
            }
            NodeTuple entry = longest(DrillYaml.entries(node), rest);
            if (entry != null) {
                String key = DrillYaml.key(entry);
                Node value = entry.getValueNode();
                if (key.equals(rest)) {
                    add(Spot.replacing(text, value), value);
                } else {
                    follow(value, rest.substring(key.length() + 1));
                }
                return;
            }
            miss(node, rest);
        }

        private void miss(Node node, String rest) throws TuneRefused {
            boolean map = node instanceof MappingNode || DrillYaml.empty(node);
            boolean last = rest.indexOf('.') < 0;
            if (map && last) {
                if (!rest.matches(PLAIN_KEY)) {
                    throw new TuneRefused("--vary " + path + ": '" + rest + "' cannot be a key of a drill");
                }
                add(Spot.adding(text, node, rest), node);
                return;
            }
            wrong = word(rest);
            if (!map) {
                single = before(rest);
            }
            DrillYaml.entries(node).forEach(each -> known.add(DrillYaml.key(each)));
        }

        private void followItems(Node list, String rest) throws TuneRefused {
            List<Node> items = DrillYaml.items(list);
            String first = word(rest);
            if (first.matches("[0-9]+") && rest.length() > first.length()) {
                int number = first.length() > 6 ? 0 : Integer.parseInt(first);
                if (number < 1 || number > items.size()) {
                    throw new TuneRefused(
                            "--vary " + path + ": there is no item " + first + "; the list has " + items.size());
                }
                only = new Sharing(top);
                follow(items.get(number - 1), rest.substring(first.length() + 1));
                return;
            }
            boolean named = false;
            for (Node item : items) {
                String name = name(item, rest);
                if (name != null) {
                    named = true;
                    only = new Sharing(top);
                    follow(item, rest.substring(name.length() + 1));
                }
            }
            for (Node item : named ? List.<Node>of() : items) {
                follow(item, rest);
            }
        }

        private @Nullable String name(Node item, String rest) {
            for (String key : new String[] {"to", "as"}) {
                Node node = DrillYaml.value(item, key);
                String name = node == null ? null : DrillYaml.scalar(node);
                if (name != null && rest.startsWith(name + ".")) {
                    return name;
                }
            }
            return null;
        }

        /** What an alias shares is changed once where every place of it is meant, and never by the way. */
        private void add(Spot spot, Node where) throws TuneRefused {
            checkAlone(where);
            if (reached.add(where)) {
                spots.add(spot);
            }
        }

        private void checkAlone(Node node) throws TuneRefused {
            if (only != null && only.shared(node)) {
                throw new TuneRefused("--vary " + path
                        + ": an alias shares this setting with another place; write it out there, or vary it for all");
            }
        }

        private String before(String rest) {
            String done = path.substring(0, path.length() - rest.length() - 1);
            return done.substring(done.lastIndexOf('.') + 1);
        }

        String nowhere() {
            if (single != null) {
                return "'" + single + "' is written as a single value; write it as a map, with '" + wrong + "' in it";
            }
            String near = NearWord.nearest(wrong, known);
            return "no '" + wrong + "' is written in this drill where the path leads; "
                    + (near == null
                            ? "write it there, or look at the paths in `steelyard help tune`"
                            : "did you mean '" + near + "'?");
        }
    }

    private static String word(String rest) {
        int point = rest.indexOf('.');
        return point < 0 ? rest : rest.substring(0, point);
    }

    /** The entry with the longest key that is the path or its beginning up to a point. */
    private static @Nullable NodeTuple longest(List<NodeTuple> entries, String rest) {
        NodeTuple found = null;
        for (NodeTuple each : entries) {
            String key = DrillYaml.key(each);
            boolean fits = rest.equals(key) || rest.startsWith(key + ".");
            if (fits && (found == null || key.length() > DrillYaml.key(found).length())) {
                found = each;
            }
        }
        return found;
    }
}
