package steelyard.harness.report;

import java.io.IOException;
import java.nio.file.Path;
import java.util.List;
import steelyard.harness.record.FolderRefused;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.RunData.PoolRow;
import steelyard.harness.record.RunFolder;

/** What the report needs of a run folder. */
record RunFiles(RunData run, Columns columns) {

    static RunFiles read(Path folder) throws IOException {
        try {
            RunData run = RunData.read(RunFolder.existing(folder));
            return new RunFiles(run, Columns.of(run.slices(), run.backends()));
        } catch (FolderRefused e) {
            throw new IOException(e.getMessage(), e);
        } catch (IllegalArgumentException e) {
            throw new IOException(folder + " holds no run that can be read: " + e.getMessage(), e);
        }
    }

    List<BackendRow> backends() {
        return run.backends();
    }

    List<String> pools() {
        return run.pools().stream().map(PoolRow::name).toList();
    }

    boolean complete() {
        return run.ended().equals("complete");
    }

    boolean live() {
        return run.stage().equals("live");
    }

    /** How long the play was recorded, in seconds. */
    double played() {
        return columns.size() == 0 ? 0 : columns.from()[columns.size() - 1] + Columns.SECONDS;
    }
}
