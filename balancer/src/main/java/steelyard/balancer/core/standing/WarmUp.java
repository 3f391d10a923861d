package steelyard.balancer.core.standing;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.pick.Ramp;
import steelyard.balancer.settings.WarmUpSettings;

/**
 * The ramp of one backend after a return.
 *
 * <pre>
 * fraction
 *   1 |            ________      max(floor, time since return / ramp)
 *     |          /
 *     |        /
 * floor|_____/
 *     +-----------------------
 *      return      return + ramp
 * </pre>
 */
final class WarmUp {
    private final @Nullable WarmUpSettings settings;
    private boolean warming;
    private long sinceNanos;

    WarmUp(@Nullable WarmUpSettings settings) {
        this.settings = settings;
    }

    boolean warming() {
        return warming;
    }

    /** The backend has returned; where no ramp is set it is full at once. */
    void begin(long nowNanos) {
        warming = settings != null;
        sinceNanos = nowNanos;
    }

    /** The backend is away, or full. */
    void end() {
        warming = false;
    }

    /** When the ramp is full; only while {@link #warming}. */
    long deadlineNanos() {
        return settings == null ? sinceNanos : sinceNanos + settings.rampNanos();
    }

    /** In billionths; {@link Ramp#FULL} while not warming. */
    long fraction(long nowNanos) {
        if (!warming || settings == null) {
            return Ramp.FULL;
        }
        double ramped = (double) (nowNanos - sinceNanos) / settings.rampNanos();
        return Math.min(Ramp.FULL, Math.round(Math.max(settings.floor(), ramped) * Ramp.FULL));
    }
}
