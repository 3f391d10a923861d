package steelyard.harness.tune;

import steelyard.drills.model.Measure.Unit;
import steelyard.harness.compare.Direction;
import steelyard.harness.forecast.Figure;
import steelyard.harness.forecast.Spread;
import steelyard.harness.record.Wording;
import steelyard.harness.tune.Result.Axis;

/** Results of cells in words, the same on a terminal and on a page. */
public final class TuneWords {
    private TuneWords() {}

    /** The median over plays; {@code none} when no play has a value. */
    public static String median(Axis axis) {
        return value(axis.figure().unit(), axis.spread().median());
    }

    /** The mean over the plays that have a value, and how many have none. */
    public static String mean(Axis axis) {
        String mean = value(axis.figure().unit(), axis.mean());
        int without = axis.spread().undefined();
        return without == 0
                ? mean
                : mean + ", none in " + without + " of " + axis.spread().plays();
    }

    /** The band of 90 % of plays. */
    public static String band90(Axis axis) {
        Spread spread = axis.spread();
        return band(axis, spread.low90(), spread.high90());
    }

    /** The band of 95 % of plays. */
    public static String band95(Axis axis) {
        Spread spread = axis.spread();
        return band(axis, spread.low95(), spread.high95());
    }

    private static String band(Axis axis, double low, double high) {
        if (Double.isNaN(low)) {
            return "";
        }
        Unit unit = axis.figure().unit();
        return axis.spread().constant() ? "always " + value(unit, low) : value(unit, low) + " to " + value(unit, high);
    }

    /** A value; {@code none} for NaN. */
    public static String value(Unit unit, double value) {
        return Double.isNaN(value) ? "none" : Wording.value(unit, value);
    }

    /** What is measured, and which side is the better one. */
    public static String aim(Figure figure) {
        Direction direction = Aim.direction(figure);
        return figure.text() + " ("
                + switch (direction.side()) {
                    case LESS -> "less is better";
                    case MORE -> "more is better";
                    case MIDDLE -> "nearer to " + value(figure.unit(), direction.middle()) + " is better";
                    case NONE -> "no side is better";
                }
                + ")";
    }

    /** What is to be said of a cell beside the others: {@code non-dominated, taken}; empty for nothing. */
    public static String mark(Result result, Front.Mark mark, boolean taken) {
        if (!result.fit()) {
            return "unfit to judge";
        }
        return !taken ? mark.word() : mark.word().isEmpty() ? "taken" : mark.word() + ", taken";
    }

    /** A share of plays: {@code 98 %}. */
    public static String share(double share) {
        return Wording.value(Unit.SHARE, share);
    }
}
