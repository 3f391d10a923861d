package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Trace;

class TraceFilesTest {
    private static final long MS = 1_000_000L;

    @TempDir
    Path folder;

    private Path trace;

    @BeforeEach
    void name() {
        trace = folder.resolve("times.csv");
    }

    private Parsed<Drill> read(String more) {
        return DrillReader.read("d", """
                drill: D
                about: A.
                stage:
                  pools:
                    seats:
                      method: round-robin
                      serves: {workers: 1, time: {trace: times.csv%s}}
                      backends: {fulmar: , gannet: }
                traffic: [{to: seats, rate: 1/s}]
                lasts: 1s
                expect: [{measure: failed, at-most: 1%%}]
                """.formatted(more), folder);
    }

    private List<String> shown(String more) {
        return read(more).problems().stream().map(Problem::toString).toList();
    }

    private Trace taken(String more) {
        Serves.Time time = read(more)
                .value()
                .orElseThrow()
                .stage()
                .backends()
                .get(0)
                .serves()
                .time();
        assertThat(time.law()).isEqualTo(Serves.Law.TRACE);
        assertThat(time.trace()).isNotNull();
        return time.trace();
    }

    @Test
    void read_ofOneDurationALine_takesThemInOrder() throws IOException {
        Files.writeString(trace, "12ms\n8ms\r\n\n1m0.5s\n");
        Trace taken = taken("");
        assertThat(taken.nanos().toArray()).containsExactly(12 * MS, 8 * MS, 60_500 * MS);
        assertThat(taken.order()).isEqualTo(Trace.Order.SAMPLED);
        // (12 + 8 + 60500) / 3 ms
        assertThat(taken.nanos().mean()).isEqualTo(60_520 * MS / 3.0);
    }

    @Test
    void read_ofAColumn_takesThatOneBelowItsHead() throws IOException {
        Files.writeString(trace, "ferry,took\nnorth,\"12ms\"\nsouth, 8ms\n");
        Trace taken = taken(", column: took, order: replayed");
        assertThat(taken.nanos().toArray()).containsExactly(12 * MS, 8 * MS);
        assertThat(taken.order()).isEqualTo(Trace.Order.REPLAYED);
        assertThat(taken.column()).isEqualTo("took");
    }

    @Test
    void read_withoutAColumn_takesTheFirstOne() throws IOException {
        Files.writeString(trace, "took,ferry\n12ms,north\n");
        assertThat(taken("").nanos().toArray()).containsExactly(12 * MS);
    }

    @Test
    void read_ofBadLines_saysEachWithThePlaceInTheDrillAndItsLine() throws IOException {
        Files.writeString(trace, "ferry,took\nnorth,12\nsouth,soon\neast\nwest,0s\nnorth,-5ms\n");
        String there = "d:7:42: 'trace' cannot be taken: times.csv, line ";
        assertThat(shown(", column: took"))
                .containsExactly(
                        there + "2: '12' has no unit; write 12ms, 12s or 12m",
                        there + "3: 'soon' is not a duration; write it like 15s, 250ms, 1.5s or 1m30s",
                        there + "4: there is no time; write one, such as 12ms, or drop the line",
                        there + "5: '0s' is not above zero, up to a day; drop the line",
                        there + "6: '-5ms' is not a duration; write it like 15s, 250ms, 1.5s or 1m30s");
    }

    @Test
    void read_ofABareNumberInTheFirstLine_isNoHead() throws IOException {
        Files.writeString(trace, "12\n");
        assertThat(shown(""))
                .containsExactly("d:7:42: 'trace' cannot be taken: times.csv, line 1: '12' has no unit; write 12ms, 12s"
                        + " or 12m");
    }

    @Test
    void read_ofVeryManyBadLines_saysTheFirstTen() throws IOException {
        Files.writeString(trace, "soon\n" + "later\n".repeat(1_000));
        assertThat(shown("")).hasSize(10);
    }

    @Test
    void read_ofATraceWithoutTimes_saysSo() throws IOException {
        Files.writeString(trace, "\n \n");
        assertThat(shown("")).containsExactly("d:7:42: the trace holds no time; write one duration a line");
        Files.writeString(trace, "took\n\n");
        assertThat(shown("")).containsExactly("d:7:42: the trace holds no time below its head; write one a line");
    }

    @Test
    void read_ofATraceThatIsTooLargeOrNoText_saysSo() throws IOException {
        Files.write(trace, new byte[TraceFiles.MOST_BYTES + 1]);
        assertThat(shown("")).containsExactly("d:7:42: the trace holds more than 33 MB; shorten it");
        Files.write(trace, "12ms\nFähre".getBytes(StandardCharsets.ISO_8859_1));
        assertThat(shown("")).containsExactly("d:7:42: the trace is not UTF-8; save it as UTF-8 text");
    }

    @Test
    void read_ofADrillInNoFolder_refusesItsTrace() {
        String text = "drill: D\nabout: A.\nstage: {pools: {seats: {method: round-robin, serves: {workers: 1,"
                + " time: {trace: times.csv}}, backends: {fulmar: }}}}\ntraffic: [{to: seats, rate: 1/s}]\nlasts: 1s\n";
        assertThat(DrillReader.read("d", text).problems())
                .singleElement()
                .hasToString("d:3:81: a trace begins at the folder of the drill, and this drill is in none; save the"
                        + " drill as a file beside its trace");
    }
}
