package steelyard.bench;

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
 * What a hop costs on this machine now: a live play of one backend with a fixed service time, hardly loaded. The median
 * answer takes four hops and the service, so a hop is a quarter of what is left; the lateness of timers is in it.
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
                  serves: {workers: 8, time: 5ms}
                  backends: {fulmar: }
            traffic:
              - {to: berth, rate: 300/s, arrivals: even, requests: [{get: /sailings/today}]}
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
        return new Transport(Math.max(0, (latencies.median() - SERVICE_NANOS) / HOPS));
    }

    /** Times from sending to the last byte, once the process has warmed up. */
    private static final class Latencies implements PlayListener {
        private final long[] sentNanos = new long[4_000];
        private final long[] took = new long[4_000];
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

        long median() {
            return java.util.Arrays.stream(took, 0, count).sorted().toArray()[count / 2];
        }
    }
}
