package steelyard.harness.tune;

import java.util.Arrays;
import steelyard.harness.compare.Difference;
import steelyard.harness.compare.Direction;
import steelyard.harness.forecast.Figure;
import steelyard.harness.forecast.Held;
import steelyard.harness.forecast.Played;
import steelyard.harness.forecast.Spread;

/**
 * What the plays of a cell came to. Immutable.
 *
 * @param held in how many plays all expectations held at once
 * @param fit whether every play was fit to judge
 */
public record Result(Cell cell, Axis want, Axis against, Held held, boolean fit) {

    static Result of(Cell cell, Aim want, Aim against, Played played) {
        int all = 0;
        for (int play = 0; play < played.plays().size(); play++) {
            boolean held = true;
            for (int figure = 0; figure < played.expectations(); figure++) {
                held &= played.figures()
                        .get(figure)
                        .holds(played.plays().get(play).value(figure));
            }
            all += held ? 1 : 0;
        }
        return new Result(
                cell,
                Axis.of(want, played),
                Axis.of(against, played),
                Held.of(all, played.plays().size()),
                played.fit());
    }

    /** Whether all expectations hold in at least that share of plays. */
    public boolean holds(double share) {
        return held.reaches(share);
    }

    /**
     * One of the two measures, over the plays of a cell.
     *
     * <p>Cells are ranked by the mean of what a play costs, not by the median: a false alarm that comes once in twenty
     * plays does not show in a median. A play without a value ({@code never}) costs more than any with one.
     */
    public static final class Axis {
        private final Figure figure;
        private final Spread spread;
        private final double[] costs;
        private final double[] values;

        private Axis(Figure figure, double[] values) {
            this.figure = figure;
            this.values = values;
            spread = Spread.of(values);
            Direction direction = Aim.direction(figure);
            costs = Arrays.stream(values).map(direction::cost).toArray();
        }

        static Axis of(Aim aim, Played played) {
            int figure = aim.in(played.figures());
            return new Axis(played.figures().get(figure), played.values(figure));
        }

        /** An axis out of values play by play, for {@link Front}; NaN stands for a play without one. */
        static Axis of(Figure figure, double... values) {
            return new Axis(figure, values.clone());
        }

        public Figure figure() {
            return figure;
        }

        /** Where the values lie over plays, in the unit of the measure. */
        public Spread spread() {
            return spread;
        }

        /** The mean of the values that there are; NaN without any. */
        public double mean() {
            return Arrays.stream(values)
                    .filter(each -> !Double.isNaN(each))
                    .average()
                    .orElse(Double.NaN);
        }

        /** Whether its best side is a middle; its cost is then the distance from there. */
        public boolean fromMiddle() {
            return Aim.direction(figure).side() == Direction.Side.MIDDLE;
        }

        /** The mean cost of the plays with a value: the smaller the better; infinite without any. */
        public double cost() {
            return Arrays.stream(costs)
                    .filter(each -> !Double.isNaN(each))
                    .average()
                    .orElse(Double.POSITIVE_INFINITY);
        }

        /** Below zero when this is the better one, zero when they are level. */
        int compareTo(Axis other) {
            int undefined = Integer.compare(spread.undefined(), other.spread.undefined());
            return undefined != 0 ? undefined : Double.compare(cost(), other.cost());
        }

        /** Whether chance alone does not explain how far the two lie apart: by a 95 % interval over common seeds. */
        boolean tellsFrom(Axis other) {
            if (spread.undefined() != other.spread.undefined()) {
                int plays = values.length;
                return Difference.shares(
                                spread.undefined(),
                                plays,
                                other.spread.undefined(),
                                other.values.length,
                                Difference.ERROR_RATE)
                        .beyondChance();
            }
            double[] mine = new double[costs.length];
            double[] theirs = new double[costs.length];
            int pairs = 0;
            for (int play = 0; play < Math.min(costs.length, other.costs.length); play++) {
                if (!Double.isNaN(costs[play]) && !Double.isNaN(other.costs[play])) {
                    mine[pairs] = costs[play];
                    theirs[pairs++] = other.costs[play];
                }
            }
            return pairs > 1
                    && Difference.paired(
                                    Arrays.copyOf(mine, pairs), Arrays.copyOf(theirs, pairs), Difference.ERROR_RATE)
                            .beyondChance();
        }
    }
}
