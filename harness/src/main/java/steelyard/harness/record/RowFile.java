package steelyard.harness.record;

import java.io.BufferedWriter;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import org.jspecify.annotations.Nullable;

/** A text file that grows by rows. A failure is remembered and ends the file, not the play. */
final class RowFile {
    private final Path file;
    private final Trouble trouble;
    private final StringBuilder row = new StringBuilder();
    private @Nullable BufferedWriter out;

    RowFile(Path file, Trouble trouble) {
        this.file = file;
        this.trouble = trouble;
        try {
            out = Files.newBufferedWriter(file, StandardCharsets.UTF_8);
        } catch (IOException e) {
            trouble.remember(file, e);
        }
    }

    /** An empty row to fill; {@link #write} ends it. One at a time. */
    StringBuilder row() {
        row.setLength(0);
        return row;
    }

    /** Writes the row that was filled. */
    void write() {
        act(writer -> writer.append(row).append('\n'));
    }

    void flush() {
        act(BufferedWriter::flush);
    }

    void close() {
        act(BufferedWriter::close);
        out = null;
    }

    private void act(Action action) {
        BufferedWriter writer = out;
        if (writer == null) {
            return;
        }
        try {
            action.on(writer);
        } catch (IOException e) {
            out = null;
            trouble.remember(file, e);
            abandon(writer);
        }
    }

    private static void abandon(BufferedWriter writer) {
        try {
            writer.close();
        } catch (IOException e) {
            // What went wrong first has been remembered; closing after it says nothing new.
        }
    }

    private interface Action {
        void on(BufferedWriter writer) throws IOException;
    }
}
