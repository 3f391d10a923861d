package steelyard.harness.cli;

import java.util.Iterator;
import steelyard.drills.read.DrillLibrary;

/** The names of the bundled drills, for shell completion. */
final class BundledNames implements Iterable<String> {
    @Override
    public Iterator<String> iterator() {
        return DrillLibrary.names().iterator();
    }
}
