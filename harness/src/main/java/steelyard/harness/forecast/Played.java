package steelyard.harness.forecast;

import java.util.List;

/**
 * What a series came to. Immutable.
 *
 * @param series what was asked for
 * @param figures those of the expectations in the order of the drill, then the standard set; empty without a play
 * @param expectations how many of the figures are those of expectations
 * @param plays in order of their number from 0, none left out; fewer than the series asked for when it was cancelled
 */
public record Played(Series series, List<Figure> figures, int expectations, List<Play> plays) {
    public Played {
        figures = List.copyOf(figures);
        plays = List.copyOf(plays);
    }

    /** Whether every play that was asked for was played. */
    public boolean complete() {
        return plays.size() == series.plays();
    }

    /** The values of a figure, play by play; NaN where it has none. */
    public double[] values(int figure) {
        return plays.stream().mapToDouble(play -> play.value(figure)).toArray();
    }

    /** Where a figure lies over plays. */
    public Spread spread(int figure) {
        return Spread.of(values(figure));
    }

    /** In how many plays a figure held its bound; there must be a play. */
    public Held held(int figure) {
        Figure asked = figures.get(figure);
        long held =
                plays.stream().filter(play -> asked.holds(play.value(figure))).count();
        return Held.of((int) held, plays.size());
    }

    /** Whether every play was fit to judge. */
    public boolean fit() {
        return plays.stream().allMatch(Play::fit);
    }
}
