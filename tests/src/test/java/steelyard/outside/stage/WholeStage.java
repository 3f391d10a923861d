package steelyard.outside.stage;

import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Finding;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Tee;
import steelyard.harness.record.Verdict;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.virtual.Transport;
import steelyard.harness.stage.virtual.VirtualStage;

/** Plays drill texts from end to end, over a wire that takes no time. */
final class WholeStage {
    /** The mean service time of the drills here. */
    static final long SERVICE_NANOS = 10_000_000L;

    private static final Transport NO_WIRE = new Transport(0);

    private WholeStage() {}

    static Drill read(String text) {
        Parsed<Drill> parsed = DrillReader.read("drill", text);
        return parsed.value().orElseThrow(() -> new AssertionError(parsed.problems()));
    }

    /** Plays a drill and tells some listeners. */
    static void play(Drill drill, long seed, PlayListener... listeners) {
        try (VirtualStage stage = new VirtualStage(drill, seed, NO_WIRE)) {
            stage.open(new Tee(listeners));
            stage.play(new Conductor(drill, new Chance(seed), new ArrayDeque<>()));
        } catch (CannotPlay e) {
            throw new AssertionError(e);
        }
    }

    /** Plays and judges a drill; the values of its expectations in their order, NaN where one has none. */
    static double[] measure(Drill drill, long seed, PlayListener... listeners) {
        Judge judge = new Judge(drill, new Cast(drill));
        List<PlayListener> all = new ArrayList<>(Arrays.asList(listeners));
        all.add(judge);
        play(drill, seed, all.toArray(PlayListener[]::new));
        Verdict verdict = judge.verdict();
        if (!verdict.fit()) {
            throw new AssertionError(verdict.text());
        }
        return verdict.expectations().stream().mapToDouble(Finding::value).toArray();
    }

    /** A duration as a drill writes it. */
    static String seconds(long nanos) {
        return "%d.%09ds".formatted(nanos / 1_000_000_000L, nanos % 1_000_000_000L);
    }
}
