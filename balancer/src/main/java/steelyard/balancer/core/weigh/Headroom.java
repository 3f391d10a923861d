package steelyard.balancer.core.weigh;

import java.util.List;
import steelyard.balancer.settings.LoadSettings;

/**
 * What a backend's utilisations leave of its weight, in thousandths.
 *
 * <p>headroom = min over gauges k of max(floor, 1 - min(u_k, ceiling_k) / ceiling_k) ^ gain_k, at least a thousandth. A
 * gauge above its ceiling counts as at its ceiling, so that no term turns negative (common practice).
 *
 * <pre>
 * gauge    u     ceiling  gain   term
 * cpu      60 %    80 %    1     1 - 0.75 = 0.25       <- the least: 250
 * memory   45 %    90 %    1     1 - 0.5  = 0.5
 * disk     10 %   100 %    2     0.9 ^ 2  = 0.81
 * </pre>
 */
public final class Headroom {
    /** All of the weight. */
    public static final int FULL = 1000;

    private Headroom() {}

    /**
     * The headroom in thousandths, from 1 to {@link #FULL}.
     *
     * @param utilisations of the gauges, in the settings' order; below 0 counts as 0
     */
    public static int milli(LoadSettings settings, double[] utilisations) {
        List<LoadSettings.Gauge> gauges = settings.gauges();
        double least = 1;
        for (int k = 0; k < gauges.size(); k++) {
            least = Math.min(least, term(gauges.get(k), utilisations[k], settings.floor()));
        }
        return (int) Math.max(1, Math.round(FULL * least));
    }

    private static double term(LoadSettings.Gauge gauge, double utilisation, double floor) {
        double used = Math.min(Math.max(0, utilisation), gauge.ceiling()) / gauge.ceiling();
        return StrictMath.pow(Math.max(floor, 1 - used), gauge.gain());
    }
}
