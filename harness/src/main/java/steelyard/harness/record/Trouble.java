package steelyard.harness.record;

import java.io.IOException;
import java.nio.file.Path;
import org.jspecify.annotations.Nullable;

/**
 * Remembers the first thing that went wrong while a run was written. A play goes on without its record rather than
 * dying of a full disk; what was remembered is said once, at the end.
 */
final class Trouble {
    private @Nullable String first;

    /** Does something that may fail; remembers the first failure. */
    void guard(Path file, Writing writing) {
        try {
            writing.run();
        } catch (IOException e) {
            remember(file, e);
        }
    }

    void remember(Path file, IOException e) {
        if (first == null) {
            String reason = e.getMessage() == null ? e.getClass().getSimpleName() : e.getMessage();
            first = "the run is incomplete: " + file + " could not be written ("
                    + reason.lines().findFirst().orElse("") + ")";
        }
    }

    /** One line, or null when nothing went wrong. */
    @Nullable
    String line() {
        return first;
    }

    /** Something that may fail. */
    interface Writing {
        void run() throws IOException;
    }
}
