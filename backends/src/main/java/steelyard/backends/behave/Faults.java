package steelyard.backends.behave;

import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Change.Fail;
import steelyard.backends.behave.Change.Fill;
import steelyard.backends.behave.Change.FlapProbe;
import steelyard.backends.behave.Change.Heal;
import steelyard.backends.behave.Change.Kind;
import steelyard.backends.behave.Change.Load;
import steelyard.backends.behave.Change.Slow;

/** Which faults are in force, and what each asks of new work and of probes. */
final class Faults {

    private final GaugeBoard gauges;
    private boolean killed;
    private boolean hanging;
    private boolean refusing;
    private boolean failingProbes;
    private @Nullable Slow slow;
    private @Nullable Fail fail;
    private @Nullable FlapProbe flap;
    private long flapSinceNanos;
    private boolean revived;
    private long revivedNanos;

    Faults(GaugeBoard gauges) {
        this.gauges = gauges;
    }

    void apply(Change change, long nowNanos) {
        switch (change.kind()) {
            case SLOW -> slow = (Slow) change;
            case FAIL -> fail = (Fail) change;
            case HANG -> hanging = true;
            case REFUSE -> refusing = true;
            case KILL -> killed = true;
            case REVIVE -> revive(nowNanos);
            case FAIL_PROBE -> failingProbes = true;
            case FLAP_PROBE -> {
                flap = (FlapProbe) change;
                flapSinceNanos = nowNanos;
            }
            case LOAD -> gauges.load((Load) change);
            case FILL -> gauges.fill((Fill) change);
            case HEAL -> heal(((Heal) change).fault());
        }
    }

    boolean killed() {
        return killed;
    }

    boolean hanging() {
        return hanging;
    }

    boolean listening() {
        return !killed && !refusing;
    }

    /** Whether it ever came back from a kill. */
    boolean revived() {
        return revived;
    }

    /** When it last came back from a kill. */
    long revivedNanos() {
        return revivedNanos;
    }

    /** What {@code demandNanos} of new work becomes. */
    long slowed(long demandNanos) {
        return slow == null ? demandNanos : slow.slowed(demandNanos);
    }

    boolean slowsFreeProbes() {
        return slow != null && slow.probes();
    }

    /** The fault that answers this piece of new work, or null; {@code a} and {@code b} are the keys of its draws. */
    @Nullable
    Fail failing(Chance chance, boolean probe, long a, long b) {
        Fail set = fail;
        if (set == null || (probe && !set.probes())) {
            return null;
        }
        return chance.unit(Stream.FAULT, a, b) < set.share() ? set : null;
    }

    /** Whether probes that are answered now are made to fail. */
    boolean failsProbes(long nowNanos) {
        return failingProbes || (flap != null && inFirstHalf(flap.periodNanos(), nowNanos - flapSinceNanos));
    }

    private static boolean inFirstHalf(long periodNanos, long sinceNanos) {
        return sinceNanos % periodNanos < periodNanos / 2;
    }

    private void revive(long nowNanos) {
        if (killed) {
            killed = false;
            revived = true;
            revivedNanos = nowNanos;
            heal(null);
        }
    }

    private void heal(@Nullable Kind only) {
        for (Kind kind : only == null ? Kind.values() : new Kind[] {only}) {
            end(kind);
        }
    }

    private void end(Kind kind) {
        switch (kind) {
            case SLOW -> slow = null;
            case FAIL -> fail = null;
            case HANG -> hanging = false;
            case REFUSE -> refusing = false;
            case FAIL_PROBE -> failingProbes = false;
            case FLAP_PROBE -> flap = null;
            case LOAD -> gauges.endLoads();
            case FILL -> gauges.endFill();
            case KILL, REVIVE, HEAL -> {
                // Not faults that a heal ends: a dead process stays dead.
            }
        }
    }
}
