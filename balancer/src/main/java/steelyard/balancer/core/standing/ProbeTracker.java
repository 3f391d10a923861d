package steelyard.balancer.core.standing;

import java.util.function.LongToDoubleFunction;
import steelyard.balancer.settings.ProbeSettings;

/**
 * Probes of one backend: when the next one starts, and what runs of answers say.
 *
 * <p>A probe starts a period after the last one started, or when that one ended if that is later; never two at once. A
 * period is {@code every} x (1 + jitter x (2u - 1)), u drawn for the probe that begins it.
 * It passes when a good answer comes earlier than {@code within} after its start; an answer at exactly that instant is a
 * miss, so that it does not matter whether the answer or the deadline is handled first.
 *
 * <pre>
 *             misses in a row reach the limit
 *        up  -------------------------------->  down        one pass clears the run of misses,
 *            <--------------------------------              one miss the run of passes
 *             passes in a row reach the limit
 * </pre>
 */
public final class ProbeTracker {

    /** What a call asks of whoever drives it. */
    public enum Step {
        NOTHING,
        /** Start probe {@link #number()}. */
        START,
        /** Probe {@link #number()} ran out of time, which counted as a miss; stop waiting for it. */
        DROP
    }

    private final LongToDoubleFunction draw;
    private ProbeSettings settings;
    private boolean up;
    private final Rounds rounds;
    private int missesInARow;
    private int passesInARow;

    /**
     * @param up what is believed at first
     * @param firstStartNanos when the first probe starts
     * @param draw u by the number of the probe, from 0, below 1; asked only where there is jitter
     */
    public ProbeTracker(ProbeSettings settings, boolean up, long firstStartNanos, LongToDoubleFunction draw) {
        this.draw = draw;
        this.settings = settings;
        this.up = up;
        rounds = new Rounds(firstStartNanos);
    }

    public boolean up() {
        return up;
    }

    /** The number of the probe that runs or ran last, from 0; -1 before the first. */
    public long number() {
        return rounds.number();
    }

    /** When {@link #poll} has something to do next. */
    public long deadlineNanos() {
        return rounds.deadlineNanos(settings.withinNanos());
    }

    /** Does one thing that is due; call again until it says {@link Step#NOTHING}. */
    public Step poll(long nowNanos) {
        if (nowNanos - deadlineNanos() < 0) {
            return Step.NOTHING;
        }
        if (rounds.running()) {
            count(false);
            end(nowNanos);
            return Step.DROP;
        }
        rounds.start(nowNanos);
        return Step.START;
    }

    /**
     * An answer came. One to a probe that is over is ignored.
     *
     * @param good whether it was good
     * @return whether it counted
     */
    public boolean answered(long probe, boolean good, long nowNanos) {
        if (!rounds.runs(probe)) {
            return false;
        }
        count(good && passesAt(nowNanos));
        end(nowNanos);
        return true;
    }

    /** Whether an answer to the running probe would come early enough. */
    public boolean passesAt(long nowNanos) {
        return rounds.early(settings.withinNanos(), nowNanos);
    }

    /** Takes new settings; the runs so far and a probe under way go on under them. */
    public void retune(ProbeSettings newSettings, long nowNanos) {
        if (rounds.betweenTwo()) { // no draw for a probe that has not been
            rounds.respace(periodNanos(newSettings), nowNanos);
        }
        settings = newSettings;
    }

    private void end(long nowNanos) {
        rounds.end(periodNanos(settings), nowNanos);
    }

    private void count(boolean pass) {
        if (pass) {
            missesInARow = 0;
            passesInARow = Math.min(passesInARow + 1, settings.passes());
            up |= passesInARow >= settings.passes();
        } else {
            passesInARow = 0;
            missesInARow = Math.min(missesInARow + 1, settings.misses());
            up &= missesInARow < settings.misses();
        }
    }

    private long periodNanos(ProbeSettings of) {
        if (of.jitter() == 0) {
            return of.everyNanos();
        }
        double off = of.jitter() * (2 * draw.applyAsDouble(rounds.number()) - 1);
        return Math.max(1, Math.round(of.everyNanos() * (1 + off)));
    }
}
