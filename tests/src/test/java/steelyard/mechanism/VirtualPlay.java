package steelyard.mechanism;

import java.util.ArrayDeque;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Verdict;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.virtual.Transport;
import steelyard.harness.stage.virtual.VirtualStage;

/** Plays drill texts in virtual time. */
final class VirtualPlay {
    private VirtualPlay() {}

    static Drill read(String text) {
        Parsed<Drill> parsed = DrillReader.read("drill", text);
        return parsed.value().orElseThrow(() -> new AssertionError(parsed.problems()));
    }

    static Verdict judge(Drill drill, long seed) {
        Judge judge = new Judge(drill, new Cast(drill));
        try (VirtualStage stage = new VirtualStage(drill, seed, Transport.USUAL)) {
            stage.open(judge);
            stage.play(new Conductor(drill, new Chance(seed), new ArrayDeque<>()));
        } catch (CannotPlay e) {
            throw new AssertionError(e);
        }
        return judge.verdict();
    }
}
