package steelyard.arch;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Set;
import java.util.stream.Stream;

/** The source tree that these tests stand in, without what a build leaves there. */
final class House {
    private static final Set<String> LEFT_BY_WORK = Set.of("target", ".git", "runs", ".idea", ".vscode");

    private House() {}

    static Path root() {
        Path folder = Path.of("").toAbsolutePath();
        while (!Files.exists(folder.resolve(".mvn"))) {
            folder = folder.getParent();
            if (folder == null) {
                throw new IllegalStateException("not inside the source tree");
            }
        }
        return folder;
    }

    static List<Path> topLevel() {
        try (Stream<Path> entries = Files.list(root())) {
            return entries.filter(House::kept).toList();
        } catch (IOException failure) {
            throw new UncheckedIOException(failure);
        }
    }

    /** Every file of the tree. */
    static List<Path> files() {
        return topLevel().stream().flatMap(House::below).toList();
    }

    private static Stream<Path> below(Path path) {
        if (!Files.isDirectory(path)) {
            return Stream.of(path);
        }
        try (Stream<Path> entries = Files.list(path)) {
            return entries.filter(House::kept).toList().stream().flatMap(House::below);
        } catch (IOException failure) {
            throw new UncheckedIOException(failure);
        }
    }

    private static boolean kept(Path path) {
        return !LEFT_BY_WORK.contains(path.getFileName().toString());
    }

    static String text(Path file) {
        try {
            return new String(Files.readAllBytes(file), StandardCharsets.ISO_8859_1);
        } catch (IOException failure) {
            throw new UncheckedIOException(failure);
        }
    }
}
