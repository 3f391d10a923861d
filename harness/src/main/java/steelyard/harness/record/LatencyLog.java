package steelyard.harness.record;

import java.io.BufferedOutputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import org.HdrHistogram.Histogram;
import org.HdrHistogram.HistogramLogWriter;
import org.jspecify.annotations.Nullable;

/**
 * Writes {@code latency.hlog}: one histogram a slice, of good answers by due time, in nanoseconds; where there are several
 * pools, one more for each of them, tagged with its name. Base time is 0, so that nothing of the wall clock is in it.
 */
final class LatencyLog {
    private static final long SLICES_A_SECOND = 10;
    private static final double LARGEST_IN_MILLIS = 1_000_000.0;

    private final Path file;
    private final List<String> tags;
    private final Trouble trouble;
    /** The log writer's own stream would swallow a failure, so it writes here first. */
    private final ByteArrayOutputStream lines = new ByteArrayOutputStream();

    private final HistogramLogWriter writer = new HistogramLogWriter(lines);
    private final Histogram one = new Histogram(1_000, 1_000_000_000L, 3);
    private @Nullable OutputStream out;

    LatencyLog(Path file, Cast cast, Trouble trouble) {
        this.file = file;
        tags = cast.pools().stream().map(pool -> tag(pool.name())).toList();
        this.trouble = trouble;
        one.setAutoResize(true);
        trouble.guard(file, () -> out = new BufferedOutputStream(Files.newOutputStream(file)));
        writer.outputLogFormatVersion();
        writer.outputBaseTime(0);
        writer.outputLegend();
        flush();
    }

    /** Slices come in order. */
    void add(Slice slice) {
        if (slice.ok() > 0) {
            one.reset();
            slice.addLatencies(one);
            write(slice, null);
            for (int pool = 0; pool < tags.size() && slice.knowsPools(); pool++) {
                one.reset();
                slice.addLatenciesOf(pool, one);
                if (one.getTotalCount() > 0) {
                    write(slice, tags.get(pool));
                }
            }
        }
        if (slice.index() % SLICES_A_SECOND == SLICES_A_SECOND - 1) {
            flush();
        }
    }

    private void write(Slice slice, @Nullable String tag) {
        double from = (double) slice.index() / SLICES_A_SECOND;
        double to = (double) (slice.index() + 1) / SLICES_A_SECOND;
        one.setTag(tag);
        writer.outputIntervalHistogram(from, to, one, LARGEST_IN_MILLIS);
    }

    /** A pool's name as the format can hold it: without white space or commas. */
    static String tag(String pool) {
        return pool.replaceAll("[\\s,]", "_");
    }

    void close() {
        flush();
        OutputStream stream = out;
        if (stream != null) {
            trouble.guard(file, stream::close);
        }
    }

    private void flush() {
        OutputStream stream = out;
        if (stream != null) {
            try {
                lines.writeTo(stream);
                stream.flush();
            } catch (IOException e) {
                out = null;
                trouble.remember(file, e);
            }
        }
        lines.reset();
    }
}
