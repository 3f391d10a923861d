package steelyard.harness.report;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;

/** Makes the page of a run. */
public final class Report {
    /** The page's name in the run folder. */
    public static final String FILE = "report.html";

    private Report() {}

    /**
     * Reads a run folder and writes {@value #FILE} into it, in place of an earlier one. A run without a verdict (still
     * playing, interrupted or killed) gets a page that says so. The same folder gives the same bytes, apart from what
     * {@code machine.json} tells of the machine of a live run.
     *
     * @return the page's path
     * @throws IOException when a file is missing, unreadable or not in the run folder's format; the message names the
     *     file
     */
    public static Path write(Path runFolder) throws IOException {
        String page = Page.of(RunFiles.read(runFolder));
        Path target = runFolder.resolve(FILE);
        Path draft = runFolder.resolve(FILE + ".part");
        Files.writeString(draft, page);
        return Files.move(draft, target, StandardCopyOption.REPLACE_EXISTING);
    }
}
