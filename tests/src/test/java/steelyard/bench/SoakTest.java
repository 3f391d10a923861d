package steelyard.bench;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.File;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/**
 * A soak of half a minute, in a process of its own: the sockets, the heap and the lost buffers of other tests are not
 * its own. How fast it went is not looked at.
 */
class SoakTest {
    private static final long LONGEST_SECONDS = 180;

    @TempDir
    private Path folder;

    @Test
    void soak_ofSixtyThousandRequestsThroughCues_countsExactlyAndLeavesNothingOpen() throws Exception {
        File told = folder.resolve("told").toFile();
        Process process = start(told, "--requests", "60000", "--rate", "2000");
        String lines = end(process, told);
        assertThat(process.exitValue()).as(lines).isZero();
        assertThat(lines)
                .containsPattern("\nrequests: [6-9][0-9]{4}\n")
                .contains("\ncounts-exact: true\n", "\nsockets-left: 0\n", "\nbuffers-lost: 0\n")
                .containsPattern("\nheap-growth: [0-9.]+\n");
    }

    @Test
    void soak_thatWouldTakeTooLong_isRefusedInOneLine() throws Exception {
        File told = folder.resolve("told").toFile();
        Process process = start(told, "--requests", "3000000", "--rate", "100");
        assertThat(end(process, told))
                .isEqualTo("tests/bench/run: 3000000 requests at 100 a second take too long; raise --rate until it is"
                        + " over in 14 minutes\n");
        assertThat(process.exitValue()).isEqualTo(2);
    }

    private static String end(Process process, File told) throws IOException, InterruptedException {
        boolean ended = process.waitFor(LONGEST_SECONDS, TimeUnit.SECONDS);
        if (!ended) {
            process.destroyForcibly().waitFor();
        }
        String lines = Files.readString(told.toPath());
        assertThat(ended).as(lines).isTrue();
        return lines;
    }

    private static Process start(File told, String... arguments) throws IOException {
        List<String> line = new ArrayList<>(List.of(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-XX:+UseSerialGC",
                "-Xmx512m",
                "-cp",
                System.getProperty("java.class.path"),
                Soak.class.getName()));
        line.addAll(List.of(arguments));
        return new ProcessBuilder(line)
                .redirectErrorStream(true)
                .redirectOutput(told)
                .start();
    }
}
