package steelyard.drills.model;

import org.jspecify.annotations.Nullable;

/**
 * How a pool learns what state its backends are in, and what it makes of that.
 *
 * @param probe how health is probed, or null for no probes
 * @param warmUp how a returning backend is ramped up, or null for at once
 * @param bench when a backend is set aside on live failures, or null for never
 * @param load how utilisations are read, or null for not at all
 */
public record Health(
        @Nullable Probe probe,
        @Nullable WarmUp warmUp,
        @Nullable Bench bench,
        @Nullable LoadProbe load) {

    /** Nothing is asked, and every backend is believed to be well. */
    public static final Health NONE = new Health(null, null, null, null);

    public Health with(Probe other) {
        return new Health(other, warmUp, bench, load);
    }

    public Health with(WarmUp other) {
        return new Health(probe, other, bench, load);
    }

    public Health with(Bench other) {
        return new Health(probe, warmUp, other, load);
    }

    public Health with(LoadProbe other) {
        return new Health(probe, warmUp, bench, other);
    }
}
