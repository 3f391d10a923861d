package steelyard.bench;

import java.util.Arrays;
import java.util.concurrent.ConcurrentLinkedQueue;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.live.LiveStage;
import steelyard.harness.stage.virtual.Transport;

/**
 * What a hop costs on this machine now: a live play at the rate of the bundled drills, with a fixed service time and a
 * worker for everybody. An answer takes four hops and the service, so a hop is on average a quarter of what is left; the
 * lateness of timers is in it.
 */
final class MeasuredTransport {
    private static final int HOPS = 4;
    private static final long SERVICE_NANOS = 5_000_000;
    private static final int WARMING = 1_000;
    private static final String DRILL = """
            drill: A quiet berth
            about: Measures what the wire costs.
            stage:
              pools:
                berth:
                  method: round-robin
                  serves: {workers: 64, time: 5ms}
                  backends: {fulmar: , gannet: , petrel: }
            traffic:
              - {to: berth, rate: 700/s, requests: [{get: /sailings/today}]}
            lasts: 10s
            """;

    private MeasuredTransport() {}

    static Transport now() throws CannotPlay {
        Drill drill = DrillReader.read("berth", DRILL).value().orElseThrow();
        Latencies latencies = new Latencies();
        try (LiveStage stage = new LiveStage(drill, 1)) {
            stage.open(latencies);
            stage.play(new Conductor(drill, new Chance(1), new ConcurrentLinkedQueue<>()));
        }
        return new Transport(Math.max(0, (latencies.mean() - SERVICE_NANOS) / HOPS));
    }

    /** Times from sending to the last byte, once the process has warmed up. */
    private static final class Latencies implements PlayListener {
        private final long[] sentNanos = new long[20_000];
        private final long[] took = new long[20_000];
        private int count;

        @Override
        public void requestSent(long atNanos, long request, long dueNanos) {
            sentNanos[(int) request] = atNanos;
        }

        @Override
        public void requestEnded(
                long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
            if (cause == null && request >= WARMING) {
                took[count++] = atNanos - sentNanos[(int) request];
            }
        }

        long mean() {
            return Arrays.stream(took, 0, count).sum() / count;
        }
    }
}
