package steelyard.balancer.core.standing;

import java.util.function.BooleanSupplier;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.Transition.Cause;
import steelyard.balancer.settings.BenchSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.balancer.settings.WarmUpSettings;

/**
 * The standing of one backend: what its probes, its bench, the people and its ramp say, as one word.
 *
 * <p>Every event method returns the change of the word that it brought about, or null. A return to pickable begins the
 * ramp, whatever made it away. Not thread-safe; any clock origin.
 */
public final class BackendStanding {
    private final int backend;
    private final @Nullable ProbeTracker probes;
    private final Hand hand = new Hand();
    private final Bench bench;
    private final WarmUp warmUp;
    private final boolean believedUp;

    /**
     * @param probes null for none
     * @param startsUp what is believed at first; without probes it stays so until a person acts
     * @param bench null for a backend that is never benched
     */
    public BackendStanding(
            int backend,
            @Nullable ProbeTracker probes,
            boolean startsUp,
            @Nullable WarmUpSettings warmUp,
            @Nullable BenchSettings bench) {
        this.backend = backend;
        this.probes = probes;
        this.believedUp = startsUp;
        this.warmUp = new WarmUp(warmUp);
        this.bench = new Bench(bench);
    }

    /** The word that shows. */
    public Standing shown() {
        return switch (hand.state()) {
            case WITHDRAWN -> Standing.WITHDRAWN;
            case DRAINING -> Standing.DRAINING;
            case ADMITTED -> able();
        };
    }

    private Standing able() {
        if (!up()) {
            return Standing.DOWN;
        }
        if (bench.benched()) {
            return Standing.BENCHED;
        }
        return warmUp.warming() ? Standing.WARMING : Standing.UP;
    }

    /** Whether people let it take work, whatever the other facts say. */
    public boolean admitted() {
        return hand.state() == Hand.State.ADMITTED;
    }

    /** Whether failures have set it aside, whatever the other facts say. */
    public boolean benched() {
        return bench.benched();
    }

    /** Whether a drain goes on, its limit is still to come, and nothing else keeps the backend from serving. */
    public boolean servesUntilLimit() {
        return hand.state() == Hand.State.DRAINING && hand.hasDeadline() && up() && !bench.benched();
    }

    /** Whether the ramp after a return is under way. */
    public boolean warming() {
        return warmUp.warming();
    }

    /** The ramp fraction in billionths. */
    public long rampFraction(long nowNanos) {
        return warmUp.fraction(nowNanos);
    }

    /** Whether an answer on a client's kept connection should say close: people are taking the backend out. */
    public boolean saysClose() {
        return hand.state() != Hand.State.ADMITTED;
    }

    public @Nullable Transition admit(long nowNanos) {
        Standing from = shown();
        hand.admit();
        return changed(from, Cause.ADMIT, nowNanos);
    }

    /** @param limitNanos what is in flight after that is cut; above zero */
    public @Nullable Transition drain(long limitNanos, long nowNanos) {
        Standing from = shown();
        hand.drain(limitNanos, nowNanos);
        return changed(from, Cause.DRAIN, nowNanos);
    }

    public @Nullable Transition withdraw(long nowNanos) {
        Standing from = shown();
        hand.withdraw();
        return changed(from, Cause.WITHDRAW, nowNanos);
    }

    /**
     * An attempt ended that says something of the backend.
     *
     * @param room asked only when there are failures enough to bench it: whether the pool's cap allows one more
     */
    public @Nullable Transition ended(boolean failure, BooleanSupplier room, long nowNanos) {
        Standing from = shown();
        return bench.ended(failure, room, nowNanos) ? changed(from, Cause.FAILURES, nowNanos) : null;
    }

    /** Frees it when its bench time is over. */
    public @Nullable Transition pollBench(long nowNanos) {
        Standing from = shown();
        return bench.frees(nowNanos) ? changed(from, Cause.FREED, nowNanos) : null;
    }

    /** Does one thing that its probes have due. Their verdict may have changed: call {@link #afterProbe} with the word before. */
    public ProbeTracker.Step pollProbes(long nowNanos) {
        return probes == null ? ProbeTracker.Step.NOTHING : probes.poll(nowNanos);
    }

    /** The change that a counted probe brought about, given the word before it counted. */
    public @Nullable Transition afterProbe(Standing from, long nowNanos) {
        return changed(from, up() ? Cause.PASSES : Cause.MISSES, nowNanos);
    }

    /** The probes, or null where the pool has none. */
    public @Nullable ProbeTracker probes() {
        return probes;
    }

    public void retune(ProbeSettings settings, long nowNanos) {
        if (probes != null) {
            probes.retune(settings, nowNanos);
        }
    }

    /** Ends the ramp when it is full. */
    public @Nullable Transition pollRamp(long nowNanos) {
        if (!warmUp.warming() || nowNanos - warmUp.deadlineNanos() < 0) {
            return null;
        }
        Standing from = shown();
        warmUp.end();
        return changed(from, Cause.RAMPED, nowNanos);
    }

    /** Whether the limit of a drain is reached, so that what is in flight is to be cut; says so once a drain. */
    public boolean cuts(long nowNanos) {
        return hand.cuts(nowNanos);
    }

    /** Whether a poll will ever have something to do. */
    public boolean hasDeadline() {
        return probes != null || hand.hasDeadline() || warmUp.warming() || bench.benched();
    }

    /** When a poll has something to do next; only while {@link #hasDeadline}. */
    public long deadlineNanos(long nowNanos) {
        long soonest = Long.MAX_VALUE;
        if (probes != null) {
            soonest = probes.deadlineNanos() - nowNanos;
        }
        if (hand.hasDeadline()) {
            soonest = Math.min(soonest, hand.deadlineNanos() - nowNanos);
        }
        if (warmUp.warming()) {
            soonest = Math.min(soonest, warmUp.deadlineNanos() - nowNanos);
        }
        if (bench.benched()) {
            soonest = Math.min(soonest, bench.deadlineNanos() - nowNanos);
        }
        return nowNanos + soonest;
    }

    private boolean up() {
        return probes == null ? believedUp : probes.up();
    }

    /** Begins or ends the ramp as the change asks, and tells the change. */
    private @Nullable Transition changed(Standing from, Cause cause, long nowNanos) {
        boolean wasPickable = from.pickable();
        boolean isPickable = shown().pickable();
        if (isPickable && !wasPickable) {
            warmUp.begin(nowNanos);
        } else if (wasPickable && !isPickable) {
            warmUp.end();
        }
        Standing to = shown();
        return from == to ? null : new Transition(backend, from, to, cause, nowNanos);
    }
}
