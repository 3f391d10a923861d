package steelyard.outside.stage;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.HashMap;
import java.util.Map;
import java.util.TreeMap;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.drills.model.Drill;
import steelyard.harness.record.PlayListener;

/** Clients hashed through the whole virtual stage: each keeps its backend, and only those of a backend that is away move. */
class KeysStayTest {
    private static final long WITHDRAWN_NANOS = 10_000_000_000L;
    private static final long ADMITTED_NANOS = 20_000_000_000L;

    @ParameterizedTest
    @ValueSource(strings = {"ring", "rendezvous"})
    void client_backendAwayForATime_movesOnlyFromThereAndComesBack(String table) {
        Drill drill = WholeStage.read("""
                drill: Clients keep their backend
                about: One of five backends is away for a while.
                stage:
                  pools:
                    seats:
                      method: hash
                      hash: {by: client, table: %s}
                      serves: {workers: 64, time: 1ms}
                      backends: {tern: {}, skua: {}, shag: {}, puffin: {}, dunlin: {}}
                traffic: [{to: seats, rate: 1000/s, clients: 200}]
                lasts: 30s
                cues: [{at: 10s, withdraw: skua}, {at: 20s, admit: skua}]
                expect: [{measure: failed, at-most: 0%%}]
                """.formatted(table));
        Whereabouts seen = new Whereabouts();
        assertThat(WholeStage.measure(drill, 1, seen)).containsExactly(0);

        assertThat(seen.before).hasSize(200).containsValue(1).isEqualTo(seen.after);
        assertThat(seen.meanwhile).hasSize(200).doesNotContainValue(1);
        seen.before.forEach((client, backend) -> {
            if (backend != 1) {
                assertThat(seen.meanwhile).containsEntry(client, backend);
            }
        });
    }

    /** Who served each client before, while and after one was away; fails when there were two in one of these. */
    private static final class Whereabouts implements PlayListener {
        final Map<Integer, Integer> before = new TreeMap<>();
        final Map<Integer, Integer> meanwhile = new TreeMap<>();
        final Map<Integer, Integer> after = new TreeMap<>();
        private final Map<Long, Integer> clientOf = new HashMap<>();

        @Override
        public void requestDue(long atNanos, long request, int traffic, int kind, int client) {
            clientOf.put(request, client);
        }

        @Override
        public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
            Map<Integer, Integer> here =
                    atNanos < WITHDRAWN_NANOS ? before : atNanos < ADMITTED_NANOS ? meanwhile : after;
            Integer earlier = here.put(clientOf.get(request), backend);
            assertThat(earlier == null || earlier == backend).isTrue();
        }
    }
}
