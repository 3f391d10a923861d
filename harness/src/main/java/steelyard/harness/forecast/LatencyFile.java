package steelyard.harness.forecast;

import java.io.ByteArrayOutputStream;
import java.nio.charset.StandardCharsets;
import java.util.List;
import org.HdrHistogram.Histogram;
import org.HdrHistogram.HistogramLogWriter;
import org.jspecify.annotations.Nullable;

/** {@code latency.hlog} of a forecast: one histogram a second, of the good answers of all plays that bands are of. */
final class LatencyFile {
    private static final double LARGEST_IN_MILLIS = 1_000_000.0;

    private LatencyFile() {}

    static String text(List<@Nullable Histogram> seconds) {
        ByteArrayOutputStream lines = new ByteArrayOutputStream();
        HistogramLogWriter writer = new HistogramLogWriter(lines);
        writer.outputLogFormatVersion();
        writer.outputBaseTime(0);
        writer.outputLegend();
        for (int second = 0; second < seconds.size(); second++) {
            Histogram latencies = seconds.get(second);
            if (latencies != null) {
                writer.outputIntervalHistogram(second, second + 1.0, latencies, LARGEST_IN_MILLIS);
            }
        }
        writer.close();
        return lines.toString(StandardCharsets.UTF_8);
    }
}
