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

/** Follows one path through a drill to all the places that it names. {@link DrillText} says what paths mean. */
final class PathWalk {
    private static final Set<String> TOP = Set.of("stage", "traffic", "cues", "lasts");
    private static final Set<String> NO_SETTINGS = Set.of("drill", "about", "expect");
    private static final String PLAIN_KEY = "[A-Za-z0-9%_-]+";

    private final String path;
    private final String text;
    private final Node top;
    private final List<Spot> spots = new ArrayList<>();
    private final Set<Node> reached = Collections.newSetFromMap(new IdentityHashMap<>());
    /** Words that could have stood where the path went wrong. */
    private final Set<String> known = new TreeSet<>();

    private String wrong = "";
    private @Nullable String single;
    /** Set once the path has picked one of several places: then no alias may lead out of it. */
    private @Nullable Sharing only;

    /** @param text of the drill whose root is {@code top} */
    PathWalk(String path, String text, Node top) {
        this.path = path;
        this.text = text;
        this.top = top;
    }

    /** Where the path has led. */
    List<Spot> spots() {
        return spots;
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

    /** Why it led nowhere. */
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
