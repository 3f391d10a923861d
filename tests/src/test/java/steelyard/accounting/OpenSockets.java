package steelyard.bench;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.stream.Stream;

/** Open sockets of this process, where the system tells them. */
final class OpenSockets {
    private static final Path OPEN = Path.of("/proc/self/fd");

    private OpenSockets() {}

    /** How many; 0 where the system does not tell. */
    static long count() {
        if (!Files.isDirectory(OPEN)) {
            return 0;
        }
        try (Stream<Path> all = Files.list(OPEN)) {
            return all.filter(OpenSockets::isSocket).count();
        } catch (IOException failure) {
            throw new UncheckedIOException(failure);
        }
    }

    private static boolean isSocket(Path descriptor) {
        try {
            return Files.readSymbolicLink(descriptor).toString().startsWith("socket:");
        } catch (IOException closedMeanwhile) {
            return false;
        }
    }
}
