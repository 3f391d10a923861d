package steelyard.drills.model;

import org.jspecify.annotations.Nullable;

/**
 * Settings of a pool that change while a drill is played; what is null keeps its value.
 *
 * @param probe how its probes change
 * @param drainLimitNanos the new limit of drains that begin from then on, above zero
 * @param method the new method
 */
public record Retune(@Nullable ProbeChange probe, @Nullable Long drainLimitNanos, Pool.@Nullable Method method) {

    public Retune {
        Check.that(probe != null || drainLimitNanos != null || method != null, "a retune changes something");
        if (drainLimitNanos != null) {
            Check.positive(drainLimitNanos, "drain limit");
        }
    }

    /**
     * How probes change; what is null keeps its value. Kind and path never change.
     *
     * @param everyNanos as {@link Probe#everyNanos()}
     * @param withinNanos as {@link Probe#withinNanos()}
     * @param misses as {@link Probe#misses()}
     * @param passes as {@link Probe#passes()}
     * @param jitter as {@link Probe#jitter()}
     */
    public record ProbeChange(
            @Nullable Long everyNanos,
            @Nullable Long withinNanos,
            @Nullable Integer misses,
            @Nullable Integer passes,
            @Nullable Double jitter) {

        public ProbeChange {
            Check.that(
                    everyNanos != null || withinNanos != null || misses != null || passes != null || jitter != null,
                    "a change of probes changes something");
        }

        /** The probe after the change. Throws {@link IllegalArgumentException} for values out of its range. */
        public Probe of(Probe before) {
            return new Probe(
                    before.kind(),
                    before.path(),
                    everyNanos == null ? before.everyNanos() : everyNanos,
                    withinNanos == null ? before.withinNanos() : withinNanos,
                    misses == null ? before.misses() : misses,
                    passes == null ? before.passes() : passes,
                    jitter == null ? before.jitter() : jitter);
        }
    }
}
