package steelyard.drills.read;

import java.io.IOException;
import java.io.InputStream;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.InvalidPathException;
import java.nio.file.Path;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Trace;

/**
 * Reads files of recorded service times, each once. A file holds one duration a line, or comma-separated columns; the
 * first line may be a head, and is one where its column holds no duration. Empty lines are passed over.
 */
final class TraceFiles {
    /** A larger file is refused. */
    static final int MOST_BYTES = 32 << 20;

    private final Problems problems;
    private final @Nullable Path folder;
    private final Map<List<String>, Optional<Trace.Nanos>> there = new HashMap<>();

    TraceFiles(Problems problems, @Nullable Path folder) {
        this.problems = problems;
        this.folder = folder;
    }

    /** The times of a column, the first one for null; null when a problem was noted, once a file and column. */
    Trace.@Nullable Nanos read(Fields fields, String file, @Nullable String column) {
        List<String> key = List.of(file, column == null ? "" : column);
        Optional<Trace.Nanos> known = there.get(key);
        if (known == null) {
            known = Optional.ofNullable(load(fields, file, column));
            there.put(key, known);
        }
        return known.orElse(null);
    }

    private Trace.@Nullable Nanos load(Fields fields, String file, @Nullable String column) {
        Place place = fields.valuePlace("trace");
        if (folder == null) {
            problems.add(
                    place,
                    "a trace begins at the folder of the drill, and this drill is in none",
                    "save the drill as a file beside its trace");
            return null;
        }
        try {
            Path path = folder.resolve(file);
            if (!Files.isRegularFile(path)) {
                problems.add(
                        place,
                        "there is no file " + Quantity.quoted(file),
                        "name a file of durations, beginning at the folder of the drill");
                return null;
            }
            return new TraceText(file, column).read(text(path), fields);
        } catch (TooLarge e) {
            problems.add(place, "the trace holds more than " + MOST_BYTES / 1_000_000 + " MB", "shorten it");
        } catch (InvalidPathException e) {
            problems.add(place, "no file has such a name", "write the name of a file");
        } catch (CharacterCodingException e) {
            problems.add(place, "the trace is not UTF-8", "save it as UTF-8 text");
        } catch (IOException e) {
            problems.add(place, "the trace cannot be read: " + e.getMessage(), "look at its permissions");
        }
        return null;
    }

    private static String text(Path path) throws IOException {
        byte[] bytes;
        try (InputStream in = Files.newInputStream(path)) {
            bytes = in.readNBytes(MOST_BYTES + 1);
        }
        if (bytes.length > MOST_BYTES) {
            throw new TooLarge();
        }
        return StandardCharsets.UTF_8
                .newDecoder()
                .decode(ByteBuffer.wrap(bytes))
                .toString();
    }

    private static final class TooLarge extends IOException {
        private static final long serialVersionUID = 1;
    }
}
