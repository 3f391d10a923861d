package steelyard.drills.model;

import java.util.Objects;
import org.jspecify.annotations.Nullable;

/**
 * A timed action of a drill, or the same action sent by a person.
 *
 * @param name its {@code as:}, or a name made of what it does; unique in the drill
 * @param atNanos when it is due, in play time
 * @param settings what the kind needs beside its target; fields that it does not need hold their neutral value
 * @param forNanos a fault is healed after that; 0 for never
 */
public record Cue(String name, long atNanos, Kind kind, Target target, Settings settings, long forNanos) {
    public Cue {
        Objects.requireNonNull(name);
        Objects.requireNonNull(target);
        Check.notNegative(atNanos, "at");
        Check.notNegative(forNanos, "for");
    }

    /** As a person reads it: {@code kill fulmar}. */
    public String text() {
        return kind.word() + " " + target.text();
    }

    /** What a cue does. */
    public enum Kind implements Worded {
        SLOW("slow", Side.BACKEND),
        FAIL("fail", Side.BACKEND),
        HANG("hang", Side.BACKEND),
        REFUSE("refuse", Side.BACKEND),
        KILL("kill", Side.BACKEND),
        REVIVE("revive", Side.BACKEND),
        FAIL_PROBE("fail-probe", Side.BACKEND),
        FLAP_PROBE("flap-probe", Side.BACKEND),
        LOAD("load", Side.BACKEND),
        FILL("fill", Side.BACKEND),
        HEAL("heal", Side.BACKEND),
        REWEIGH("reweigh", Side.BALANCER),
        DRAIN("drain", Side.BALANCER),
        ADMIT("admit", Side.BALANCER),
        WITHDRAW("withdraw", Side.BALANCER),
        RETUNE("retune", Side.BALANCER),
        SURGE("surge", Side.TRAFFIC);

        private final String word;
        private final Side side;

        Kind(String word, Side side) {
            this.word = word;
            this.side = side;
        }

        @Override
        public String word() {
            return word;
        }

        public Side side() {
            return side;
        }

        /** Whether {@code for:} may end it: it is a fault, or a surge. */
        public boolean canEnd() {
            return switch (this) {
                case SLOW, FAIL, HANG, REFUSE, FAIL_PROBE, FLAP_PROBE, LOAD, FILL, KILL, SURGE -> true;
                case REVIVE, HEAL, REWEIGH, DRAIN, ADMIT, WITHDRAW, RETUNE -> false;
            };
        }
    }

    /** Who carries a cue out. */
    public enum Side {
        BACKEND,
        BALANCER,
        TRAFFIC
    }

    /**
     * What a cue needs beside its target.
     *
     * @param factor of {@code slow} and {@code surge}: times that much; 1 otherwise
     * @param plusNanos of {@code slow}: and that much longer
     * @param share of {@code fail}: of the new requests; 1 otherwise
     * @param status of {@code fail}, from 400 to 599
     * @param afterWork of {@code fail}: the status is sent after the work, not at once
     * @param probes whether a slow or failing backend treats probes the same way
     * @param periodNanos of {@code flap-probe}: one bad and one good half
     * @param weight of {@code reweigh}
     * @param limitNanos of {@code drain}; 0 for the pool's own
     * @param gauge of {@code load}: the gauge that is set, else null
     * @param to of {@code load} and {@code fill}: what the gauge is set to, from 0 to 1
     * @param retune of {@code retune}: what changes, else null
     */
    public record Settings(
            double factor,
            long plusNanos,
            double share,
            int status,
            boolean afterWork,
            boolean probes,
            long periodNanos,
            int weight,
            long limitNanos,
            @Nullable String gauge,
            double to,
            @Nullable Retune retune) {

        /** Nothing beside the target. */
        public static final Settings NONE = new Settings(1, 0, 1, 500, false, false, 0, 0, 0, null, 0, null);

        public Settings {
            Check.that(factor >= 0, "factor cannot be negative: %s", factor);
            Check.notNegative(plusNanos, "plus");
            Check.share(share, "share");
            Check.that(status >= 400 && status <= 599, "status %d of a failure", status);
            Check.notNegative(periodNanos, "period");
            Check.notNegative(weight, "weight");
            Check.notNegative(limitNanos, "limit");
            Check.share(to, "to");
        }

        /** Of a cue that neither sets a gauge nor retunes. */
        public Settings(
                double factor,
                long plusNanos,
                double share,
                int status,
                boolean afterWork,
                boolean probes,
                long periodNanos,
                int weight,
                long limitNanos) {
            this(factor, plusNanos, share, status, afterWork, probes, periodNanos, weight, limitNanos, null, 0, null);
        }
    }
}
