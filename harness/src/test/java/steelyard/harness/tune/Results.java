package steelyard.harness.tune;

import java.util.Map;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Measure;
import steelyard.drills.read.DrillLibrary;
import steelyard.drills.read.DrillReader;
import steelyard.harness.forecast.Figure;
import steelyard.harness.forecast.Held;
import steelyard.harness.tune.Result.Axis;

/** Results made by hand. */
final class Results {
    static final Drill DRILL = DrillReader.read(
                    "d", DrillLibrary.text("slow-one").orElseThrow())
            .value()
            .orElseThrow();
    private static final Figure FAILED = new Figure(Measure.FAILED, null, "failed, whole play", null);
    private static final Figure CHANGES =
            new Figure(Measure.STANDING_CHANGES, null, "standing-changes, whole play", null);

    private Results() {}

    /** A cell whose plays failed so much and changed so often; all expectations held in {@code held} of 10 plays. */
    static Result of(int cell, double[] failed, double[] changes, int held) {
        return new Result(
                new Cell(cell, Map.of("probe.misses", String.valueOf(cell)), "", DRILL),
                Axis.of(FAILED, failed),
                Axis.of(CHANGES, changes),
                Held.of(held, 10),
                true);
    }

    /** A measure whose best side is the middle of a bound from 1 to 3. */
    static Axis around2(double... values) {
        return Axis.of(new Figure(Measure.SHARE, "fulmar", "share of fulmar", new Bound(1, 3)), values);
    }

    static double[] always(double value) {
        return new double[] {value, value, value};
    }
}
