package steelyard.harness.record;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static steelyard.harness.record.TestDrill.FULMAR;
import static steelyard.harness.record.TestDrill.GANNET;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.S;
import static steelyard.harness.record.TestDrill.SEATS;

import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.drills.model.Drill;
import steelyard.harness.record.RunData.ReadingRow;

/** What only some stages have: weights by load, and requests that wait in the balancer. */
class LoadRecordTest {
    private static final Machine MACHINE =
            new Machine("2026-12-01T12:00:00Z", 2, 8L << 30, "Linux", "17.0.2", "epoll", null);

    private static Recorder recorder(Path folder, Drill drill) throws FolderRefused {
        RunHead head = new RunHead(drill, "drill: text\n", "virtual", "embedded", 7, "0.1.0");
        return new Recorder(RunFolder.create(folder), head, new Cast(drill), MACHINE);
    }

    private static RunData read(Path folder) throws FolderRefused {
        return RunData.read(RunFolder.existing(folder));
    }

    @Test
    void slices_weightsByLoadAndAWaitingLine_haveColumnsOfTheirOwn(@TempDir Path dir) throws Exception {
        Recorder recorder = recorder(dir, new TestDrill().load(S).waiting(20).build());
        Sample sample = new Sample(4, 2);
        sample.headroom[FULMAR] = 0.375;
        sample.waitingForBackend[SEATS] = 7;
        recorder.sampled(100 * MS, sample);
        sample.headroom[FULMAR] = 1;
        sample.waitingForBackend[SEATS] = 0;
        recorder.sampled(200 * MS, sample);
        recorder.ended(200 * MS, true);

        Slices slices = read(dir).slices();

        assertThat(slices.numbers("fulmar", "headroom")).containsExactly(0.375, 1);
        assertThat(slices.numbers("gannet", "headroom")).containsExactly(1, 1);
        assertThat(slices.numbers("pool seats:waiting")).containsExactly(7, 0);
        assertThat(slices.has("skua:headroom")).isFalse();
        assertThat(slices.has("pool cargo:waiting")).isFalse();
    }

    @Test
    void slices_neither_haveNoSuchColumn(@TempDir Path dir) throws Exception {
        Recorder recorder = recorder(dir, new TestDrill().build());
        recorder.sampled(100 * MS, new Sample(4, 2));
        recorder.loadRead(150 * MS, FULMAR, 1, 500, true);
        recorder.ended(200 * MS, true);

        assertThat(read(dir).slices().has("fulmar:headroom")).isFalse();
        assertThat(read(dir).slices().has("pool seats:waiting")).isFalse();
        assertThat(dir.resolve(RunFolder.READINGS)).doesNotExist();
        assertThat(read(dir).readings()).isEmpty();
    }

    @Test
    void readings_failAndComeBack_writeTheChangesAlone(@TempDir Path dir) throws Exception {
        Recorder recorder = recorder(dir, new TestDrill().load(S).build());
        recorder.loadRead(S, FULMAR, 0, 800, true);
        recorder.loadRead(2 * S, FULMAR, 1, 700, true);
        recorder.loadRead(5 * S, FULMAR, 1, 1_000, false);
        recorder.loadRead(5 * S, GANNET, 0, 1_000, false);
        recorder.loadRead(6 * S, FULMAR, 1, 1_000, false);
        recorder.loadRead(6_500 * MS, FULMAR, 6, 625, true);
        recorder.ended(7 * S, true);

        assertThat(Files.readString(dir.resolve(RunFolder.READINGS))).isEqualTo("""
                at,backend,reading,headroom,fresh
                1.000000,fulmar,0,0.800,true
                5.000000,fulmar,1,1.000,false
                5.000000,gannet,0,1.000,false
                6.500000,fulmar,6,0.625,true
                """);
        assertThat(read(dir).readings())
                .containsExactly(
                        new ReadingRow(1, "fulmar", 0, 0.8, true),
                        new ReadingRow(5, "fulmar", 1, 1, false),
                        new ReadingRow(5, "gannet", 0, 1, false),
                        new ReadingRow(6.5, "fulmar", 6, 0.625, true));
    }

    @Test
    void settings_ofSuchAPool_areSaidInWords(@TempDir Path dir) throws Exception {
        Recorder recorder = recorder(dir, new TestDrill().load(S).waiting(20).build());
        recorder.ended(S, true);

        assertThat(read(dir).pools().get(0).settings())
                .containsEntry("load", "/load every 1 s within 1 s, stale after 3 s, floor 10 %, cpu to 100 %")
                .containsEntry("in flight", "at most 1 a backend, 20 wait up to 1 s")
                .containsEntry("limits", "target 8000 B, head 32 KiB, body any")
                .doesNotContainKeys("bench", "affinity", "hash");
    }

    @Test
    void latencies_ofSeveralPools_areKeptByPoolToo(@TempDir Path dir) throws Exception {
        // In the first slice one answer of seats takes 20 ms and one of cargo 80 ms; in the second only cargo answers.
        Recorder recorder = recorder(dir, new TestDrill().build());
        recorder.requestDue(0, 0, 0, 0, 0);
        recorder.requestDue(0, 1, 1, 0, 0);
        recorder.requestEnded(20 * MS, 0, 0, 0, 0, null, 200);
        recorder.requestEnded(80 * MS, 1, 0, 1, 0, null, 200);
        recorder.requestDue(150 * MS, 2, 1, 0, 0);
        recorder.requestEnded(190 * MS, 2, 150 * MS, 1, 0, null, 200);
        recorder.ended(200 * MS, true);

        SliceLatencies latencies = SliceLatencies.read(RunFolder.existing(dir));

        assertThat(latencies.quantile(0, 2, 1)).isCloseTo(80.0 * MS, within(0.1 * MS));
        assertThat(latencies.of(0).getTotalCount()).isEqualTo(2);
        assertThat(latencies.ofPool("seats").quantile(0, 2, 1)).isCloseTo(20.0 * MS, within(0.1 * MS));
        assertThat(latencies.ofPool("seats").of(1)).isNull();
        assertThat(latencies.ofPool("cargo").quantile(0, 2, 0.5)).isCloseTo(40.0 * MS, within(0.1 * MS));
        assertThat(latencies.ofPool("mail").known()).isFalse();
    }
}
