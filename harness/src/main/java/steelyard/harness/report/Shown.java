package steelyard.harness.report;

import steelyard.drills.model.Measure.Unit;
import steelyard.harness.tune.Result.Axis;
import steelyard.harness.tune.TuneWords;

/**
 * A measure of a grid as its chart draws it.
 *
 * @param value the mean, or the mean distance from a middle that is best
 * @param words what it is
 */
record Shown(double value, String words, Unit unit) {

    static Shown of(Axis axis) {
        Unit unit = axis.figure().unit();
        String word = axis.figure().text();
        return axis.fromMiddle()
                ? new Shown(axis.cost(), word + ": distance from the middle of its bound", unit)
                : new Shown(axis.mean(), word, unit);
    }

    String words(double other) {
        return TuneWords.value(unit, other);
    }
}
