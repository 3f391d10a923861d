package steelyard.harness.report;

import java.io.IOException;
import java.nio.file.Path;
import java.util.List;
import steelyard.harness.record.FolderRefused;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.RunData.ForecastRow;
import steelyard.harness.record.RunData.PoolRow;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.SliceLatencies;
import steelyard.harness.record.Slices;

/**
 * What the report needs of a run folder.
 *
 * @param backends whose columns there are: backends, or in a forecast of many groups of them
 * @param columns what charts draw
 * @param latencies of each slice of a play; unknown for a forecast
 * @param sums what is added up over slices; the same, but means over plays in a forecast
 */
record RunFiles(RunData run, List<BackendRow> backends, Columns columns, Columns sums, SliceLatencies latencies) {

    static RunFiles read(Path folder) throws IOException {
        try {
            RunFolder existing = RunFolder.existing(folder);
            RunData run = RunData.read(existing);
            return run.forecast() == null
                    ? ofPlay(run, SliceLatencies.read(existing))
                    : ofForecast(run, run.forecast());
        } catch (FolderRefused e) {
            throw new IOException(e.getMessage(), e);
        } catch (IllegalArgumentException e) {
            throw new IOException(folder + " holds no run that can be read: " + e.getMessage(), e);
        }
    }

    private static RunFiles ofPlay(RunData run, SliceLatencies latencies) {
        Columns columns = Columns.of(run.slices(), run.backends());
        return new RunFiles(run, run.backends(), columns, columns, latencies);
    }

    private static RunFiles ofForecast(RunData run, ForecastRow forecast) {
        List<BackendRow> rows = forecast.rows().stream()
                .map(row -> new BackendRow(row.name(), row.pool(), "", 0))
                .toList();
        Slices slices = run.slices();
        return new RunFiles(
                run,
                rows,
                ForecastColumns.medians(slices, rows),
                ForecastColumns.means(slices, rows),
                SliceLatencies.none());
    }

    List<String> pools() {
        return run.pools().stream().map(PoolRow::name).toList();
    }

    /** The pools of which slices say what waited in the balancer. */
    List<String> queueing() {
        return pools().stream().filter(pool -> run.slices().has(queue(pool))).toList();
    }

    /** The column that says what waited in the balancer for a pool. */
    static String queue(String pool) {
        return "pool " + pool + ":waiting";
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
