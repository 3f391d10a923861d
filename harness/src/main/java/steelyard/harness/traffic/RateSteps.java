package steelyard.harness.traffic;

import java.util.List;
import steelyard.drills.model.Traffic.Step;

/** A rate that changes in steps; the last step holds for ever. Immutable. */
final class RateSteps {
    private static final double NANOS_A_SECOND = 1e9;

    private final double[] perSecond;
    private final double[] endNanos;

    RateSteps(List<Step> steps) {
        perSecond = new double[steps.size()];
        endNanos = new double[steps.size()];
        double end = 0;
        for (int i = 0; i < perSecond.length; i++) {
            end += steps.get(i).forNanos();
            endNanos[i] = end;
            perSecond[i] = steps.get(i).perSecond();
        }
        endNanos[perSecond.length - 1] = Double.POSITIVE_INFINITY;
    }

    /** The step that holds at an instant. */
    int stepAt(double nanos) {
        int step = 0;
        while (nanos >= endNanos[step]) {
            step++;
        }
        return step;
    }

    /** Requests expected between two instants, without a surge. */
    double between(double fromNanos, double toNanos) {
        double expected = 0;
        double at = fromNanos;
        for (int step = stepAt(fromNanos); at < toNanos; step++) {
            double end = Math.min(endNanos[step], toNanos);
            expected += perSecond[step] * ((end - at) / NANOS_A_SECOND);
            at = end;
        }
        return expected;
    }

    /**
     * The instant by which {@code requests} more are expected, or infinity where the rate stays 0.
     *
     * @param factor on every rate, 0 or above
     */
    double after(double fromNanos, double requests, double factor) {
        double at = fromNanos;
        double left = requests;
        for (int step = stepAt(fromNanos); step < perSecond.length; step++) {
            double rate = perSecond[step] * factor;
            double due = rate > 0 ? at + left * NANOS_A_SECOND / rate : Double.POSITIVE_INFINITY;
            if (due < endNanos[step]) {
                return due;
            }
            if (endNanos[step] != Double.POSITIVE_INFINITY) {
                left -= rate * ((endNanos[step] - at) / NANOS_A_SECOND);
                at = endNanos[step];
            }
        }
        return Double.POSITIVE_INFINITY;
    }
}
