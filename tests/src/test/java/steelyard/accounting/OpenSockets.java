package steelyard.accounting;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.stream.Stream;

/** Open sockets of this process, where the system tells them. */
public final class OpenSockets {
    private static final Path OPEN = Path.of("/proc/self/fd");
    private static final Path LOCAL = Path.of("/proc/self/net/unix");
    private static final String SOCKET = "socket:[";

    private OpenSockets() {}

    /** How many, without those within the machine, of which the JDK keeps one; 0 where the system does not tell. */
    public static long count() {
        if (!Files.isDirectory(OPEN)) {
            return 0;
        }
        try (Stream<Path> all = Files.list(OPEN)) {
            String local = Files.readString(LOCAL);
            return all.map(OpenSockets::target)
                    .filter(each -> each.startsWith(SOCKET))
                    .filter(each -> !holds(local, each.substring(SOCKET.length(), each.length() - 1)))
                    .count();
        } catch (IOException failure) {
            throw new UncheckedIOException(failure);
        }
    }

    /** Whether a table of the kernel has a line on this inode; a path may follow it. */
    private static boolean holds(String table, String inode) {
        return table.contains(" " + inode + " ") || table.contains(" " + inode + "\n");
    }

    private static String target(Path descriptor) {
        try {
            return Files.readSymbolicLink(descriptor).toString();
        } catch (IOException closedMeanwhile) {
            return "";
        }
    }
}
