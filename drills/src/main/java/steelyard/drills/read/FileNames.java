package steelyard.drills.read;

import java.nio.file.Files;
import java.nio.file.InvalidPathException;
import java.nio.file.Path;
import org.jspecify.annotations.Nullable;

/** Names of files and folders that a drill names; they begin at the folder of the drill, and have to be there. */
final class FileNames {
    private final Problems problems;
    private final @Nullable Path folder;

    /** With the folder of the drill, or null to leave names as they are. */
    FileNames(Problems problems, @Nullable Path folder) {
        this.problems = problems;
        this.folder = folder;
    }

    /** The file behind a key as a path; null when the key is absent or a problem was noted. */
    @Nullable
    String read(Fields fields, String key) {
        String name = fields.read(key, Names.FILE);
        Path path = name == null || folder == null ? null : resolve(fields, key, name, folder);
        if (name == null || folder == null || path == null) {
            return folder == null ? name : null;
        }
        if (!Files.isRegularFile(path)) {
            problems.add(
                    fields.valuePlace(key),
                    "there is no file " + Quantity.quoted(name),
                    "name a file, beginning at the folder of the drill");
            return null;
        }
        return path.toString();
    }

    private @Nullable Path resolve(Fields fields, String key, String name, Path from) {
        try {
            return from.resolve(name);
        } catch (InvalidPathException e) {
            problems.add(fields.valuePlace(key), "no file has such a name", "write the name of a file");
            return null;
        }
    }
}
