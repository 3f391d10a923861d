package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import java.util.TreeSet;
import org.junit.jupiter.api.Test;

/** On a drill that holds every key: nothing that may be written goes unread, by reader or schema. */
class EveryKeyTest {
    static final String TEXT = DrillLibrary.resource("every-key.yaml");

    /** Holds the files that the drill names. */
    static final Path FOLDER = Path.of("src/test/resources/steelyard/drills").toAbsolutePath();

    /** Any text will do for these. */
    private static final Set<String> FREE = Set.of("drill", "about", "x-shore");

    @Test
    void everyKeyDrill_holdsEveryKeyTheReaderKnows() {
        Set<String> there = new TreeSet<>();
        scalars(root(), "", (key, scalar) -> {}, there);
        Set<String> known = new TreeSet<>();
        for (Keys keys : Keys.values()) {
            known.addAll(keys.words());
        }
        assertThat(there).containsAll(known);
    }

    @Test
    void everyKeyDrill_isReadWithoutAProblem() {
        assertThat(DrillReader.read("every-key.yaml", TEXT, FOLDER).problems()).isEmpty();
        assertThat(SchemaCheck.complaints(TEXT)).isEmpty();
    }

    @Test
    void read_withAnyOneValueSpoiled_notesAProblemOnItsLine() {
        List<Node.Scalar> values = new ArrayList<>();
        scalars(
                root(),
                "",
                (key, scalar) -> {
                    if (!FREE.contains(key) && !scalar.empty()) {
                        values.add(scalar);
                    }
                },
                new TreeSet<>());
        assertThat(values).hasSizeGreaterThan(250);
        for (Node.Scalar value : values) {
            Parsed<?> parsed = DrillReader.read("spoiled", spoiled(value), FOLDER);
            assertThat(parsed.problems())
                    .as("'%s' at %s", value.text(), value.place())
                    .anyMatch(problem -> problem.severity() == Problem.Severity.PROBLEM
                            && problem.line() == value.place().line());
        }
    }

    private static String spoiled(Node.Scalar value) {
        String[] lines = TEXT.split("\n", -1);
        int line = value.place().line() - 1;
        int start = value.place().column() - 1;
        assertThat(lines[line].substring(start)).startsWith(value.text());
        lines[line] = lines[line].substring(0, start)
                + "\"?!\""
                + lines[line].substring(start + value.text().length());
        return String.join("\n", lines);
    }

    private static Node root() {
        Node root = TreeBuilder.build(TEXT, new Problems("every-key.yaml"));
        assertThat(root).isNotNull();
        return root;
    }

    private interface Visitor {
        void visit(String key, Node.Scalar scalar);
    }

    private static void scalars(Node node, String key, Visitor visitor, Set<String> keys) {
        if (node instanceof Node.Scalar scalar) {
            visitor.visit(key, scalar);
        } else if (node instanceof Node.Items items) {
            items.nodes().forEach(one -> scalars(one, key, visitor, keys));
        } else if (node instanceof Node.Entries map) {
            for (Node.Entry entry : map.list()) {
                keys.add(entry.key());
                scalars(entry.value(), entry.key(), visitor, keys);
            }
        }
    }
}
