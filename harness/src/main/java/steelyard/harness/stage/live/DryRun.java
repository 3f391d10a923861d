package steelyard.harness.stage.live;

import java.util.ArrayDeque;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.CannotPlay;

/**
 * A short play that nobody hears, once in a process, before its first true one.
 *
 * <p>Without it the first requests of a play would wait for a few hundred classes to be loaded: a quarter of a second
 * of lateness that is neither the balancer's nor the backends'.
 */
final class DryRun {
    private static final String DRILL = """
            drill: Dry run
            about: One backend, 150 requests, nobody looks.
            stage:
              pools:
                dry:
                  method: weighted-round-robin
                  probe: {path: /dry, every: 50ms, within: 50ms}
                  serves: {workers: 8, queue: 64, time: {lognormal: {median: 500us, 99%: 1ms}}}
                  backends: {dry: {}}
            traffic:
              - to: dry
                arrivals: even
                rate: 1000/s
                clients: 4
                give-up: 1s
                requests: [{get: /, share: 50%}, {post: /, body: 64B, share: 50%}]
            lasts: 150ms
            """;

    private static boolean done;

    private DryRun() {}

    static synchronized void once() throws CannotPlay {
        if (done) {
            return;
        }
        done = true;
        Drill drill = DrillReader.read("dry run", DRILL).value().orElseThrow();
        try (LiveStage stage = LiveStage.forDryRun(drill)) {
            stage.open(new PlayListener() {});
            stage.play(new Conductor(drill, new Chance(0), new ArrayDeque<>()));
        }
    }
}
