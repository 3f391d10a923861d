package steelyard.harness.record;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.DirectoryStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;

/** The folder that a play leaves behind, and the names of its files. */
public final class RunFolder {
    public static final String RUN = "run.json";
    public static final String SLICES = "slices.csv";
    public static final String STANDING = "standing.csv";
    public static final String CUES = "cues.csv";
    /** Where weights go by load: from when on, and when they ceased to and began again for want of readings. */
    public static final String READINGS = "readings.csv";

    public static final String LATENCY = "latency.hlog";
    public static final String MACHINE = "machine.json";
    public static final String VERDICT = "verdict.json";
    public static final String JUNIT = "junit.xml";
    /** Of a forecast alone: a row for each play. */
    public static final String PLAYS = "plays.csv";

    public static final String REPORT = "report.html";

    private final Path path;

    private RunFolder(Path path) {
        this.path = path;
    }

    /**
     * Makes the folder, its parents too, or takes an empty one that is there.
     *
     * @throws FolderRefused when it cannot be made or written to, or holds something already
     */
    public static RunFolder create(Path path) throws FolderRefused {
        if (Files.exists(path) && !Files.isDirectory(path)) {
            throw new FolderRefused(path + " is a file; name a folder that does not exist yet");
        }
        Path above = path.toAbsolutePath().normalize().getParent();
        while (above != null && !Files.exists(above)) {
            above = above.getParent();
        }
        if (above != null && !Files.isDirectory(above)) {
            throw new FolderRefused(
                    path + " cannot be made, since " + above.getFileName() + " is a file; name another folder");
        }
        if (Files.isDirectory(path) && !empty(path)) {
            throw new FolderRefused(path + " is already there and not empty; name another folder or remove it");
        }
        try {
            Files.createDirectories(path);
            Files.delete(Files.createTempFile(path, "check", null));
        } catch (IOException e) {
            throw new FolderRefused(path + " cannot be written to; name a folder that can be written to", e);
        }
        return new RunFolder(path);
    }

    /**
     * Takes a folder that a play left behind.
     *
     * @throws FolderRefused when it holds no run
     */
    public static RunFolder existing(Path path) throws FolderRefused {
        if (!Files.isRegularFile(path.resolve(RUN))) {
            throw new FolderRefused(path + " holds no run: there is no " + RUN + " in it");
        }
        return new RunFolder(path);
    }

    public Path path() {
        return path;
    }

    /** The path of one of its files. */
    public Path file(String name) {
        return path.resolve(name);
    }

    /**
     * Writes a whole file beside the old one and puts it in its place, so that a kill leaves the one or the other.
     *
     * @param name one of the folder's files
     */
    public void replace(String name, String text) throws IOException {
        Path fresh = file(name + ".part");
        Files.write(fresh, text.getBytes(StandardCharsets.UTF_8));
        Files.move(fresh, file(name), StandardCopyOption.REPLACE_EXISTING, StandardCopyOption.ATOMIC_MOVE);
    }

    private static boolean empty(Path path) throws FolderRefused {
        try (DirectoryStream<Path> entries = Files.newDirectoryStream(path)) {
            return !entries.iterator().hasNext();
        } catch (IOException e) {
            throw new FolderRefused(path + " cannot be read; name another folder", e);
        }
    }
}
