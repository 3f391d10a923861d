package steelyard.balancer.live;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.stream.Stream;
import org.assertj.core.api.Assertions;
import org.awaitility.Awaitility;
import org.junit.jupiter.api.extension.AfterEachCallback;
import org.junit.jupiter.api.extension.BeforeEachCallback;
import org.junit.jupiter.api.extension.ExtensionContext;

/**
 * After each live test: no buffer is left, and no socket is open that was not open before. What is in flight is counted
 * by {@link LivePlay#close}. Sockets are counted where the system shows them.
 */
public final class Accounting implements BeforeEachCallback, AfterEachCallback {
    private static final Path DESCRIPTORS = Path.of("/proc/self/fd");
    private static final Path LOCAL = Path.of("/proc/self/net/unix");
    private long before;

    static {
        Leaks.watch();
    }

    @Override
    public void beforeEach(ExtensionContext test) throws IOException {
        before = sockets();
    }

    @Override
    public void afterEach(ExtensionContext test) {
        Awaitility.await()
                .atMost(Duration.ofSeconds(20))
                .untilAsserted(() ->
                        Assertions.assertThat(sockets()).as("open sockets").isLessThanOrEqualTo(before));
        Leaks.check();
    }

    /** Sockets that this process has open, but those within the machine, of which the JDK keeps one; 0 where none show. */
    static long sockets() throws IOException {
        if (!Files.isDirectory(DESCRIPTORS)) {
            return 0;
        }
        String local = Files.readString(LOCAL);
        try (Stream<Path> all = Files.list(DESCRIPTORS)) {
            return all.map(Accounting::target)
                    .filter(target -> target.startsWith("socket:["))
                    .filter(target -> !local.contains(" " + target.substring(8, target.length() - 1) + " "))
                    .filter(target -> !local.contains(" " + target.substring(8, target.length() - 1) + "\n"))
                    .count();
        }
    }

    private static String target(Path descriptor) {
        try {
            return Files.readSymbolicLink(descriptor).toString();
        } catch (IOException closedMeanwhile) {
            return "";
        }
    }
}
