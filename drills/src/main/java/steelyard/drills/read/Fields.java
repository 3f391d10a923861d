package steelyard.drills.read;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Predicate;
import org.jspecify.annotations.Nullable;

/** A map of a drill, read key by key. What is not known or there twice is noted when it is opened. */
final class Fields {
    private final Keys keys;
    private final List<String> listed;
    private final Place place;
    private final Problems problems;
    private final Map<String, Node.Entry> entries = new LinkedHashMap<>();
    private final List<String> unknown = new ArrayList<>();
    private boolean odd;

    private Fields(Keys keys, List<String> listed, Place place, Problems problems) {
        this.keys = keys;
        this.listed = listed;
        this.place = place;
        this.problems = problems;
    }

    /** Opens a node as a map of those keys; what is no map is noted and read as an empty one. */
    static Fields open(Node node, Keys keys, Problems problems) {
        return open(node, keys, keys.words(), problems);
    }

    /** The same, where only some of the keys may stand in this one: the message about an unknown key lists those. */
    static Fields open(Node node, Keys keys, List<String> listed, Problems problems) {
        Fields fields = new Fields(keys, listed, node.place(), problems);
        if (node instanceof Node.Entries map) {
            map.list().forEach(fields::keep);
        } else if (!(node instanceof Node.Scalar scalar && scalar.empty())) {
            fields.odd = true;
            problems.add(
                    node.place(),
                    keys.noun() + " is written here as " + node.noun(),
                    "write it like " + keys.example());
        }
        return fields;
    }

    private void keep(Node.Entry entry) {
        String key = entry.key();
        if (!keys.words().contains(key)) {
            odd = true;
            unknown.add(key);
            String known = keys.noun() + " knows " + Sentence.and(listed);
            problems.add(
                    entry.place(),
                    "unknown key " + Quantity.quoted(key) + " in " + keys.noun(),
                    NearWord.remedy(key, listed, known));
            return;
        }
        Node.Entry first = entries.putIfAbsent(key, entry);
        if (first != null) {
            problems.add(
                    entry.place(),
                    "'" + key + "' is given twice",
                    "keep one; the first is on line " + first.place().line());
        }
    }

    /** Whether the map itself was wrong: then a missing key may only be a misspelt one. */
    boolean odd() {
        return odd;
    }

    Place place() {
        return place;
    }

    Problems problems() {
        return problems;
    }

    boolean has(String key) {
        return node(key) != null;
    }

    /** The keys that are there, in the order of the file. */
    List<String> given() {
        return List.copyOf(entries.keySet());
    }

    @Nullable
    Node node(String key) {
        Node.Entry entry = entries.get(known(key));
        return entry == null ? null : entry.value();
    }

    /** Where a key stands, or the place of the map without it. */
    Place keyPlace(String key) {
        Node.Entry entry = entries.get(known(key));
        return entry == null ? place : entry.place();
    }

    /** Where the value of a key stands, or the place of the map without it. */
    Place valuePlace(String key) {
        Node node = node(key);
        return node == null ? place : node.place();
    }

    /** The value of a key; null when it is absent or, noted, wrong. */
    <T> @Nullable T read(String key, Quantity<T> quantity) {
        Node node = node(key);
        return node == null ? null : quantity.read(node, key, problems);
    }

    /** The value of a key, or another one when it is absent or, noted, wrong. */
    <T> T read(String key, Quantity<T> quantity, T otherwise) {
        T value = read(key, quantity);
        return value == null ? otherwise : value;
    }

    /** The value of a key that has to be there; a harmless one when a problem was noted. */
    <T> T need(String key, Quantity<T> quantity, T harmless) {
        if (!has(key)) {
            missing(key, "write " + key + ": " + quantity.instance());
        }
        return read(key, quantity, harmless);
    }

    /** Notes that a key is missing, unless the map is none or an unknown key of it was probably meant as this one. */
    void missing(String key, String remedy) {
        boolean misspelt = unknown.stream().anyMatch(word -> key.equals(NearWord.nearest(word, listed)));
        if (odd == !unknown.isEmpty() && !misspelt) {
            problems.add(place, keys.noun() + " needs '" + key + "'", remedy);
        }
    }

    /** The map behind a key, empty when the key is absent. */
    Fields map(String key, Keys inner) {
        Node node = node(key);
        return node == null ? new Fields(inner, inner.words(), place, problems) : open(node, inner, problems);
    }

    /** The nodes of the list behind a key; what is no list is noted. */
    List<Node> list(String key) {
        Node node = node(key);
        if (node == null) {
            return List.of();
        }
        if (node instanceof Node.Items items) {
            return items.nodes();
        }
        problems.add(node.place(), "'" + key + "' is " + node.noun() + ", not a list", "write a list");
        return List.of();
    }

    /** The named entries of the map behind a key; a second one of a name is noted and left out. */
    List<Node.Entry> named(String key, String noun) {
        return named(key, noun, Names::fits, Names.RULE);
    }

    /** The same for gauges, whose names begin with a letter. */
    List<Node.Entry> gauges(String key) {
        return named(key, "gauge", Names::fitsGauge, Names.GAUGE_RULE);
    }

    private List<Node.Entry> named(String key, String noun, Predicate<String> fits, String rule) {
        Node node = node(key);
        if (node == null) {
            return List.of();
        }
        if (!(node instanceof Node.Entries map)) {
            problems.add(
                    node.place(),
                    "'" + key + "' is " + node.noun() + ", not a map",
                    "write a name and a colon for each " + noun);
            return List.of();
        }
        Map<String, Node.Entry> byName = new LinkedHashMap<>();
        for (Node.Entry entry : map.list()) {
            Node.Entry first = byName.putIfAbsent(entry.key(), entry);
            if (first != null) {
                problems.add(
                        entry.place(),
                        noun + " '" + entry.key() + "' is there twice",
                        "rename one; the first is on line " + first.place().line());
            } else if (!fits.test(entry.key())) {
                problems.add(entry.place(), Quantity.quoted(entry.key()) + " cannot name a " + noun, rule);
            }
        }
        return new ArrayList<>(byName.values());
    }

    /** One value or a list of them; those that are wrong are noted and left out. */
    <T> List<T> values(String key, Quantity<T> quantity) {
        List<T> values = new ArrayList<>();
        Node node = node(key);
        List<Node> nodes = node == null ? List.of() : node instanceof Node.Items items ? items.nodes() : List.of(node);
        for (Node one : nodes) {
            T value = quantity.read(one, key, problems);
            if (value != null) {
                values.add(value);
            }
        }
        return values;
    }

    private String known(String key) {
        if (!keys.words().contains(key)) {
            throw new IllegalStateException(key + " is not listed for " + keys);
        }
        return key;
    }
}
