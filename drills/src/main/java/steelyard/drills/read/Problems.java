package steelyard.drills.read;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.HashSet;
import java.util.List;
import java.util.Set;

/** Collects what is found while one text is read. */
final class Problems {
    /** More lines than that help nobody. */
    private static final int MOST = 200;

    private final String file;
    private final List<Problem> found = new ArrayList<>();
    private final Set<String> refusedNames = new HashSet<>();
    private boolean refused;

    Problems(String file) {
        this.file = file;
    }

    void add(Place place, String message, String remedy) {
        refuse();
        keep(Problem.Severity.PROBLEM, place, message, remedy);
    }

    private void refuse() {
        if (!refused) {
            // A notice on a text with problems is often their mere consequence.
            found.clear();
            refused = true;
        }
    }

    void notice(Place place, String message, String remedy) {
        if (!refused) {
            keep(Problem.Severity.NOTICE, place, message, remedy);
        }
    }

    private void keep(Problem.Severity severity, Place place, String message, String remedy) {
        if (found.size() < MOST) {
            found.add(new Problem(severity, file, place.line(), place.column(), message, remedy));
        }
    }

    /** Remembers a name that was refused where it was given. */
    void refuseName(String name) {
        refusedNames.add(name);
    }

    /** Whether a text counts from a refused name; what is wrong was noted at the name. */
    boolean meansRefusedName(String text) {
        return refusedNames.stream().anyMatch(name -> text.equals(name) || text.startsWith(name + " "));
    }

    /** Whether the text cannot become a value. */
    boolean any() {
        return refused;
    }

    /** The problems in the order of the file; the notices only where there is no problem. */
    List<Problem> inOrder() {
        List<Problem> sorted = new ArrayList<>(found);
        sorted.sort(Comparator.comparingInt(Problem::line).thenComparingInt(Problem::column));
        return sorted;
    }
}
