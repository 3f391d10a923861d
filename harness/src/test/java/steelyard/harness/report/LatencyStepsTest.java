package steelyard.harness.report;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.HdrHistogram.Histogram;
import org.HdrHistogram.HistogramLogWriter;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.SliceLatencies;
import steelyard.harness.report.Stretches.Stretch;

class LatencyStepsTest {
    @TempDir
    private Path folder;

    /** One slice of 99 answers after 10 ms and one of 99 after 20 ms and one after 400 ms. */
    private SliceLatencies latencies() throws IOException {
        TinyRun.write(folder);
        ByteArrayOutputStream log = new ByteArrayOutputStream();
        HistogramLogWriter writer = new HistogramLogWriter(log);
        writer.outputBaseTime(0);
        writer.outputIntervalHistogram(0, 0.1, of(99, 10_000_000), 1e6);
        Histogram second = of(99, 20_000_000);
        second.recordValue(400_000_000);
        writer.outputIntervalHistogram(0.1, 0.2, second, 1e6);
        writer.close();
        Files.write(folder.resolve(RunFolder.LATENCY), log.toByteArray());
        return RunFiles.read(folder).latencies();
    }

    private static Histogram of(int count, long nanos) {
        Histogram histogram = new Histogram(1_000, 1_000_000_000L, 3);
        histogram.recordValueWithCount(nanos, count);
        return histogram;
    }

    @Test
    void step_ofRisingValues_leavesNoGapAndNeverFalls() {
        for (int bits = 6; bits <= 11; bits++) {
            int last = 0;
            for (long nanos = 0; nanos < 20_000_000; nanos += 512) {
                int step = LatencySteps.step(nanos, bits);
                assertThat(step - last).isBetween(0, 1);
                last = step;
            }
        }
    }

    @Test
    void json_ofSlices_saysStepsAndHowOften() throws IOException {
        int ten = LatencySteps.step(10_000_000, 11);
        int twenty = LatencySteps.step(20_000_000, 11);
        int long400 = LatencySteps.step(400_000_000, 11);

        assertThat(LatencySteps.json(latencies(), 3).toString())
                .isEqualTo("{\"bits\":11,\"slices\":[[" + ten + ",-99],[" + twenty + ",-99," + (long400 - twenty)
                        + "],[]]}");
    }

    @Test
    void stretch_withLatencies_hasTheQuantilesOfAllItsAnswers() throws IOException {
        latencies();

        Stretch before = Stretches.of(RunFiles.read(folder)).get(0);

        // 199 answers: the 100th took 20 ms, and so did the 198th, which is 99 % of them; a mean of slices says
        // otherwise.
        assertThat(before.p50()).isBetween(20.0, 20.03);
        assertThat(before.p99()).isBetween(20.0, 20.03);
    }
}
