package steelyard.balancer.core.decide;

/** Where the core's draws come from: each is made by key, so that no order of calls changes it. */
@FunctionalInterface
public interface Chance {
    /** What a draw is for; those of one kind are independent of those of another. */
    enum Draw {
        /** The point of the probe period at which a backend's first probe starts: (backend, 0). */
        PROBE_PHASE,
        /** How far the period after a probe is off, where probes have jitter: (backend, number of the probe). */
        PROBE_JITTER,
        /** The point of the load period at which a backend's first reading starts: (backend, 0). */
        READING_PHASE,
        /** Lots that a method draws: (request, 64 x attempt + number of the lot). */
        PICK
    }

    /** 64 bits, each set with chance one half. */
    long bits(Draw draw, long a, long b);

    /** Uniform in [0, 1), a multiple of 2^-53. */
    default double unit(Draw draw, long a, long b) {
        return (bits(draw, a, b) >>> 11) * 0x1.0p-53;
    }
}
