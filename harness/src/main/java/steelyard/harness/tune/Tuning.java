package steelyard.harness.tune;

import java.util.ArrayList;
import java.util.List;
import java.util.function.IntConsumer;
import steelyard.drills.model.Drill;
import steelyard.harness.forecast.Figure;
import steelyard.harness.forecast.Forecast;
import steelyard.harness.forecast.Played;
import steelyard.harness.forecast.Plays;
import steelyard.harness.forecast.Series;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Finding;
import steelyard.harness.record.Verdict;
import steelyard.harness.stage.CannotPlay;

/**
 * Plays a grid: every cell with the same seeds, so that cells differ by their settings and by nothing else.
 *
 * <p>One thread calls {@link #play}, once; {@link #cancel} may come from any.
 */
public final class Tuning implements AutoCloseable {
    private final Request request;
    private final Plays plays;

    /**
     * What is to be tuned.
     *
     * @param want the measure to be made better
     * @param against the measure that it costs
     * @param seed of the first play of every cell
     * @param plays a cell, at least 2
     * @param hold the share of plays in which all expectations must hold, from 0 to 1
     */
    public record Request(Grid grid, Aim want, Aim against, long seed, int plays, double hold) {
        /** How many plays of all cells there will be. */
        public int allPlays() {
            return Math.multiplyExact(grid.cells().size(), plays);
        }
    }

    /**
     * What a grid came to.
     *
     * @param results of the cells that were played in full, in their order
     * @param marks one for each
     * @param complete whether all cells were
     */
    public record Tuned(Request request, List<Result> results, List<Front.Mark> marks, boolean complete) {
        public Tuned {
            results = List.copyOf(results);
            marks = List.copyOf(marks);
        }

        /** What one would take; there must be a result. */
        public Choice choice() {
            return Choice.of(results, marks, request.hold());
        }
    }

    /**
     * Prepares the plays.
     *
     * @param threads how many plays may go on at once
     * @throws TuneRefused when a measure is none of the drill's
     * @throws CannotPlay when a cell cannot be forecast
     */
    public Tuning(Request request, int threads) throws TuneRefused, CannotPlay {
        this.request = request;
        for (Cell cell : request.grid().cells()) {
            List<Figure> figures = figures(cell.drill());
            request.want().check("--want", figures);
            request.against().check("--against", figures);
            try {
                Plays.check(cell.drill());
            } catch (CannotPlay cannot) {
                throw new CannotPlay("with " + cell.words() + ": " + cannot.getMessage(), cannot);
            }
        }
        plays = new Plays(threads);
    }

    /** Those of a play that never began: their words are those of every play. */
    private static List<Figure> figures(Drill drill) {
        Judge judge = new Judge(drill, new Cast(drill));
        judge.ended(0, false);
        Verdict verdict = judge.verdict();
        List<Finding> findings = new ArrayList<>(verdict.expectations());
        findings.addAll(verdict.measures());
        return findings.stream()
                .map(each -> new Figure(each.measure(), each.of(), each.text(), each.bound()))
                .toList();
    }

    /**
     * Plays cell after cell; blocks until all are played, or it is cancelled.
     *
     * @param done is told after each play how many of all have been played, by the calling thread
     * @throws CannotPlay when a cell cannot be played after all
     */
    public Tuned play(IntConsumer done) throws CannotPlay {
        List<Result> results = new ArrayList<>();
        int[] played = {0};
        for (Cell cell : request.grid().cells()) {
            Series series = Series.of(cell.drill(), request.seed(), request.plays());
            Played all = plays.play(series, play -> done.accept(++played[0]));
            if (!all.complete()) {
                break;
            }
            results.add(Result.of(cell, request.want(), request.against(), all));
        }
        boolean complete = results.size() == request.grid().cells().size();
        return new Tuned(request, results, Front.marks(results), complete);
    }

    /** Ends the plays soon; cells that are not complete then are left out. Any thread. */
    public void cancel() {
        plays.cancel();
    }

    /** What is asked for where a person says nothing. */
    public static double usualHold() {
        return Forecast.USUAL_HOLD;
    }

    @Override
    public void close() {
        plays.close();
    }
}
