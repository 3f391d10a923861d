package steelyard.harness.cli;

import java.nio.file.Files;
import java.nio.file.Path;
import java.time.LocalDateTime;
import java.time.format.DateTimeFormatter;

/** Names of run folders for people who name none. */
final class RunPath {
    private static final DateTimeFormatter STAMP = DateTimeFormatter.ofPattern("yyyyMMdd-HHmmss");
    private static final int MOST_OF_ONE_SECOND = 100;

    private RunPath() {}

    /** {@code runs/lose-one-of-three-20261201-124500}, with a number behind it where that is there already. */
    static Path unused(String stem, LocalDateTime now) {
        Path wanted = Path.of("runs", stem + "-" + STAMP.format(now));
        Path path = wanted;
        for (int number = 2; Files.exists(path) && number < MOST_OF_ONE_SECOND; number++) {
            path = wanted.resolveSibling(wanted.getFileName() + "-" + number);
        }
        return path;
    }
}
