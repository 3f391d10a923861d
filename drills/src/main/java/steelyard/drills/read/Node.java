package steelyard.drills.read;

import java.util.List;

/** A node of the tree that a text holds, with its place. An alias is the node it stands for. */
sealed interface Node {
    Place place();

    /** Nodes in the tree below and including this one, aliases counted each time. */
    long size();

    /** What it is, as a message says it. */
    String noun();

    /** A single value; YAML's own types are not looked at, since every value of a drill has a form of its own. */
    record Scalar(Place place, String text, boolean plain) implements Node {
        @Override
        public long size() {
            return 1;
        }

        @Override
        public String noun() {
            return "a single value";
        }

        /** Whether nothing was written, as in {@code fulmar:}. */
        boolean empty() {
            return plain && (text.isEmpty() || text.equals("~") || text.equals("null"));
        }
    }

    /** A list. */
    record Items(Place place, List<Node> nodes, long size) implements Node {
        @Override
        public String noun() {
            return "a list";
        }
    }

    /** A map from names to nodes, in the order of the file; a key may stand in it twice. */
    record Entries(Place place, List<Entry> list, long size) implements Node {
        @Override
        public String noun() {
            return "a map";
        }
    }

    /** A key and what it leads to. */
    record Entry(Place place, String key, Node value) {}
}
