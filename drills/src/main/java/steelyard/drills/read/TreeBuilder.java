package steelyard.drills.read;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.Iterator;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import org.snakeyaml.engine.v2.api.LoadSettings;
import org.snakeyaml.engine.v2.api.lowlevel.Parse;
import org.snakeyaml.engine.v2.common.Anchor;
import org.snakeyaml.engine.v2.events.AliasEvent;
import org.snakeyaml.engine.v2.events.Event;
import org.snakeyaml.engine.v2.events.NodeEvent;
import org.snakeyaml.engine.v2.events.ScalarEvent;
import org.snakeyaml.engine.v2.exceptions.Mark;
import org.snakeyaml.engine.v2.exceptions.MarkedYamlEngineException;

/**
 * YAML text to a tree of {@link Node}s, or to the one problem that stopped it.
 *
 * <p>Built from parse events instead of the library's composed nodes, because those lose the place of an alias and
 * the limits here need it: an alias bomb is refused at the alias that would cross the limit, before anything grows.
 */
final class TreeBuilder {
    /** A drill nests 8 deep at most; the rest is room for other people's generators. */
    static final int MOST_DEPTH = 30;

    static final long MOST_NODES = 200_000;

    private final String text;
    private final Iterator<Event> events;
    private final Map<Anchor, Node> anchored = new HashMap<>();
    private long nodes;

    private TreeBuilder(String text) {
        this.text = text;
        LoadSettings settings = LoadSettings.builder().setUseMarks(true).build();
        this.events = new Parse(settings).parseString(text).iterator();
    }

    /** The tree, or null when a problem was noted. */
    static @Nullable Node build(String text, Problems problems) {
        try {
            return new TreeBuilder(text).document();
        } catch (Refused refused) {
            problems.add(refused.place, refused.problem, refused.remedy);
            return null;
        }
    }

    private Node document() throws Refused {
        Event event = next();
        while (event.getEventId() == Event.ID.StreamStart) {
            event = next();
        }
        if (event.getEventId() == Event.ID.StreamEnd) {
            throw new Refused(Place.START, "the file is empty", "a drill begins with drill: and its title");
        }
        Node root = node(next(), 0);
        next();
        Event after = next();
        if (after.getEventId() != Event.ID.StreamEnd) {
            throw new Refused(place(after), "a second document begins here", "keep one drill in a file");
        }
        return root;
    }

    private Node node(Event event, int depth) throws Refused {
        if (depth > MOST_DEPTH) {
            throw new Refused(place(event), "nested more than " + MOST_DEPTH + " deep", "a drill needs 8 levels");
        }
        if (event instanceof AliasEvent alias) {
            return alias(alias);
        }
        Place place = place(event);
        count(1, place);
        Node node = event instanceof ScalarEvent scalar
                ? new Node.Scalar(place, scalar.getValue(), scalar.isPlain())
                : event.getEventId() == Event.ID.SequenceStart ? items(place, depth) : entries(place, depth);
        Optional<Anchor> anchor = ((NodeEvent) event).getAnchor();
        anchor.ifPresent(name -> anchored.put(name, node));
        return node;
    }

    private Node alias(AliasEvent event) throws Refused {
        Anchor name = event.getAlias();
        Node node = anchored.get(name);
        if (node == null) {
            throw new Refused(
                    place(event),
                    "nothing above is anchored as '" + name + "'",
                    "write &" + name + " before the value");
        }
        count(node.size(), place(event));
        return node;
    }

    private void count(long more, Place place) throws Refused {
        nodes += more;
        if (nodes > MOST_NODES) {
            throw new Refused(
                    place, "more than " + MOST_NODES + " values, aliases counted each time", "use fewer aliases");
        }
    }

    private Node items(Place place, int depth) throws Refused {
        List<Node> list = new ArrayList<>();
        long size = 1;
        for (Event event = next(); event.getEventId() != Event.ID.SequenceEnd; event = next()) {
            Node node = node(event, depth + 1);
            size += node.size();
            list.add(node);
        }
        return new Node.Items(place, list, size);
    }

    private Node entries(Place place, int depth) throws Refused {
        List<Node.Entry> list = new ArrayList<>();
        long size = 1;
        for (Event event = next(); event.getEventId() != Event.ID.MappingEnd; event = next()) {
            Place keyPlace = place(event);
            if (!(node(event, depth + 1) instanceof Node.Scalar key)) {
                throw new Refused(keyPlace, "a key is a list or a map", "write a name before the colon");
            }
            Node value = node(next(), depth + 1);
            size += 1 + value.size();
            list.add(new Node.Entry(keyPlace, key.text(), value));
        }
        return new Node.Entries(place, list, size);
    }

    private Event next() throws Refused {
        try {
            return events.next();
        } catch (MarkedYamlEngineException e) {
            throw refusal(e);
        } catch (RuntimeException e) {
            // The library's own slips on broken text (numbers out of range in an escape, say) are no slips of ours.
            throw new Refused(Place.START, "not YAML: " + e.getMessage(), "compare the file with a bundled drill");
        }
    }

    private Refused refusal(MarkedYamlEngineException e) {
        boolean breaksOff = said(e).contains("end of");
        Optional<Mark> mark = breaksOff
                ? e.getContextMark().or(e::getProblemMark)
                : e.getProblemMark().or(e::getContextMark);
        Place place = mark.map(TreeBuilder::place).orElse(Place.START);
        Place tab = tabInIndentation(place.line());
        return tab == null
                ? new Refused(place, "not YAML: " + said(e), "look here and at the line above")
                : new Refused(tab, "a tab in the indentation", "indent with spaces");
    }

    private static String said(MarkedYamlEngineException e) {
        String problem = e.getProblem() == null ? "the text breaks off" : e.getProblem();
        return e.getContext() == null ? problem : e.getContext() + ", " + problem;
    }

    /** The first tab in front of the text of a line, down to the line of the error that it may have led to. */
    private @Nullable Place tabInIndentation(int lastLine) {
        int line = 1;
        int column = 1;
        boolean inFront = true;
        for (int i = 0; i < text.length() && line <= lastLine; i++) {
            char c = text.charAt(i);
            if (c == '\n') {
                line++;
                column = 0;
                inFront = true;
            } else if (c == '\t' && inFront) {
                return new Place(line, column);
            } else if (c != ' ') {
                inFront = false;
            }
            column++;
        }
        return null;
    }

    private static Place place(Event event) {
        return event.getStartMark().map(TreeBuilder::place).orElse(Place.START);
    }

    private static Place place(Mark mark) {
        return new Place(mark.getLine() + 1, mark.getColumn() + 1);
    }

    /** What ends the building of a tree. */
    private static final class Refused extends Exception {
        private final Place place;
        private final String problem;
        private final String remedy;

        Refused(Place place, String problem, String remedy) {
            super(problem, null, false, false);
            this.place = place;
            this.problem = problem;
            this.remedy = remedy;
        }
    }
}
