package steelyard.balancer.settings;

import org.jspecify.annotations.Nullable;

/**
 * How a pool's backends are probed.
 *
 * @param path what an HTTP probe asks for; null makes it a TCP probe, which only connects
 * @param everyNanos from one start to the next, above zero
 * @param withinNanos an answer must come earlier than that, above zero
 * @param misses in a row that make a backend down, at least 1
 * @param passes in a row that make it up, at least 1
 * @param jitter each period is {@code every} times a number drawn evenly from 1 - jitter to 1 + jitter; from 0, below 1
 */
public record ProbeSettings(
        @Nullable String path, long everyNanos, long withinNanos, int misses, int passes, double jitter) {
    public ProbeSettings {
        Check.that(everyNanos > 0, "probe every %d ns", everyNanos);
        Check.that(withinNanos > 0, "probe within %d ns", withinNanos);
        Check.that(misses >= 1, "misses: %d", misses);
        Check.that(passes >= 1, "passes: %d", passes);
        Check.that(jitter >= 0 && jitter < 1, "jitter %s", jitter);
    }

    /** Without jitter. */
    public ProbeSettings(@Nullable String path, long everyNanos, long withinNanos, int misses, int passes) {
        this(path, everyNanos, withinNanos, misses, passes, 0);
    }
}
