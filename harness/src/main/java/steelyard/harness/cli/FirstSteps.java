package steelyard.harness.cli;

import java.util.List;
import java.util.concurrent.ConcurrentLinkedQueue;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Traffic;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayBoard;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Tee;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.live.LiveStage;

/**
 * A moment of play before the play: the drill's own stage and requests, no cues, nobody looking. A process that has just
 * started is busy loading and compiling for its first thousand requests, and a play that began so would show the start
 * of this process instead of the drill.
 */
final class FirstSteps {
    private static final long LAST_NANOS = 900_000_000L;
    private static final double REQUESTS_A_SECOND = 900;

    private FirstSteps() {}

    /** Plays them on a stage of their own, which is gone afterwards. What cannot be played shows in the true play. */
    static void play(Drill drill, long seed, Interrupts interrupts) {
        if (LiveStage.tooMuch(drill)) {
            return;
        }
        Drill first = brief(drill);
        Cast cast = new Cast(first);
        PlayListener listener = new Tee(new Judge(first, cast), new PlayBoard(cast));
        try (LiveStage stage = new LiveStage(first, seed)) {
            interrupts.atFirst(stage::interrupt);
            stage.open(listener);
            stage.play(new Conductor(first, new Chance(seed), new ConcurrentLinkedQueue<>()));
        } catch (CannotPlay notHere) {
            // The true play is about to say it.
        }
    }

    private static Drill brief(Drill drill) {
        double each = REQUESTS_A_SECOND / drill.traffic().size();
        List<Traffic> traffic = drill.traffic().stream()
                .map(stream -> new Traffic(
                        stream.pool(),
                        stream.arrivals(),
                        List.of(new Traffic.Step(LAST_NANOS, each)),
                        stream.clients(),
                        stream.skew(),
                        Math.min(stream.giveUpNanos(), LAST_NANOS),
                        stream.requests()))
                .toList();
        List<Pool> pools =
                drill.stage().pools().stream().map(FirstSteps::onAnyPort).toList();
        steelyard.drills.model.Stage stage = new steelyard.drills.model.Stage(
                drill.stage().loops(),
                drill.stage().connections(),
                drill.stage().hosts(),
                pools);
        return new Drill(drill.name(), drill.about(), stage, traffic, LAST_NANOS, List.of(), List.of());
    }

    /** The port that a drill asks for is kept for the true play. */
    private static Pool onAnyPort(Pool pool) {
        return pool.like().wire(pool.wire().with(pool.wire().front().on(0))).of(pool.backends());
    }
}
