package steelyard.harness.tune;

import steelyard.harness.tune.Result.Axis;

/**
 * A cell that was rehearsed.
 *
 * @param seed of the rehearsal
 * @param folder name of its run folder beside the files of the grid
 * @param fit whether the rehearsal was fit to judge
 * @param want what it measured, in the unit of the measure; NaN without a value
 * @param against the same of the other measure
 */
public record Confirmed(Result result, long seed, String folder, boolean fit, double want, double against) {
    /** Files hold durations in seconds with six decimals at least. */
    private static final double ROUNDING = 1e-6;

    /** Whether the rehearsal lies inside the forecast's 95 % band of what is wanted. */
    public boolean wantInside() {
        return inside(result.want(), want);
    }

    /** The same of the other measure. */
    public boolean againstInside() {
        return inside(result.against(), against);
    }

    /** Without a value a rehearsal is inside when plays without one are more than the band leaves outside. */
    private static boolean inside(Axis axis, double value) {
        if (Double.isNaN(value)) {
            return axis.spread().undefined() > 0.05 * axis.spread().plays();
        }
        double rounding = ROUNDING * Math.max(1e-9, Math.abs(value));
        return value >= axis.spread().low95() - rounding
                && value <= axis.spread().high95() + rounding;
    }
}
