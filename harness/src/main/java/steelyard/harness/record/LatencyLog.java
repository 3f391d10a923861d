package steelyard.harness.record;

import java.io.BufferedOutputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import org.HdrHistogram.Histogram;
import org.HdrHistogram.HistogramLogWriter;
import org.jspecify.annotations.Nullable;

/**
 * Writes {@code latency.hlog}: one histogram a second, of good answers by due time, in nanoseconds. Base time is 0, so
 * that nothing of the wall clock is in it.
 */
final class LatencyLog {
    private static final long SLICES_A_SECOND = 10;
    private static final double LARGEST_IN_MILLIS = 1_000_000.0;

    private final Path file;
    private final Trouble trouble;
    /** The log writer's own stream would swallow a failure, so it writes here first. */
    private final ByteArrayOutputStream lines = new ByteArrayOutputStream();

    private final HistogramLogWriter writer = new HistogramLogWriter(lines);
    private final Histogram second = new Histogram(1_000, 1_000_000_000L, 3);
    private @Nullable OutputStream out;
    private long secondNumber;

    LatencyLog(Path file, Trouble trouble) {
        this.file = file;
        this.trouble = trouble;
        second.setAutoResize(true);
        trouble.guard(file, () -> out = new BufferedOutputStream(Files.newOutputStream(file)));
        writer.outputLogFormatVersion();
        writer.outputBaseTime(0);
        writer.outputLegend();
        flush();
    }

    /** Slices come in order. */
    void add(Slice slice) {
        long number = slice.index() / SLICES_A_SECOND;
        if (number != secondNumber) {
            endSecond();
            secondNumber = number;
        }
        slice.addLatencies(second);
    }

    void close() {
        endSecond();
        OutputStream stream = out;
        if (stream != null) {
            trouble.guard(file, stream::close);
        }
    }

    private void endSecond() {
        if (second.getTotalCount() > 0) {
            writer.outputIntervalHistogram(secondNumber, secondNumber + 1.0, second, LARGEST_IN_MILLIS);
            second.reset();
        }
        flush();
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
