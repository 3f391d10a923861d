package steelyard.balancer.core.standing;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.Transition.Cause;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.balancer.settings.WarmUpSettings;

/**
 * The standing of one backend: what its probes, the people and its ramp say, as one word.
 *
 * <p>Every event method returns the change of the word that it brought about, or null. A return to pickable begins the
 * ramp, whatever made it away. Not thread-safe; any clock origin.
 */
public final class BackendStanding {
    private final int backend;
    private final @Nullable ProbeTracker probes;
    private final Hand hand = new Hand();
    private final WarmUp warmUp;
    private final boolean believedUp;

    /**
     * @param probes null for none
     * @param startsUp what is believed at first; without probes it stays so until a person acts
     */
    public BackendStanding(
            int backend, @Nullable ProbeTracker probes, boolean startsUp, @Nullable WarmUpSettings warmUp) {
        this.backend = backend;
        this.probes = probes;
        this.believedUp = startsUp;
        this.warmUp = new WarmUp(warmUp);
    }

    /** The word that shows. */
    public Standing shown() {
        return switch (hand.state()) {
            case WITHDRAWN -> Standing.WITHDRAWN;
            case DRAINING -> Standing.DRAINING;
            case ADMITTED -> !up() ? Standing.DOWN : warmUp.warming() ? Standing.WARMING : Standing.UP;
        };
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
        return changed(from, Cause.WARMED, nowNanos);
    }

    /** Whether the limit of a drain is reached, so that what is in flight is to be cut; says so once a drain. */
    public boolean cuts(long nowNanos) {
        return hand.cuts(nowNanos);
    }

    /** Whether a poll will ever have something to do. */
    public boolean hasDeadline() {
        return probes != null || hand.hasDeadline() || warmUp.warming();
    }

    /** When a poll has something to do next; only while {@link #hasDeadline}. */
    public long deadlineNanos() {
        long earliest = 0;
        boolean any = false;
        if (probes != null) {
            earliest = probes.deadlineNanos();
            any = true;
        }
        if (hand.hasDeadline() && (!any || hand.deadlineNanos() - earliest < 0)) {
            earliest = hand.deadlineNanos();
            any = true;
        }
        if (warmUp.warming() && (!any || warmUp.deadlineNanos() - earliest < 0)) {
            earliest = warmUp.deadlineNanos();
        }
        return earliest;
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
