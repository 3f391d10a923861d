package steelyard.harness.record;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;

/**
 * Hears what happens in a play.
 *
 * <p>A stage owes: calls from one thread at a time, in non-decreasing {@code atNanos} (play time), decisions of one
 * balancer instance in the order in which they were made. A listener owes: to return soon, and to keep no list of
 * requests. Pools, backends and traffic streams are given by their number in the {@link Cast}. Every method does
 * nothing unless overridden, so that a listener hears only what it is about.
 */
public interface PlayListener {

    /**
     * A request is due; told at its due time, or a little later by a stage that lags.
     *
     * @param request numbers follow the due times from 0, none left out
     * @param kind its place in the mix
     */
    default void requestDue(long atNanos, long request, int traffic, int kind, int client) {}

    /** The generator has sent it; {@code atNanos - dueNanos} is the generator's own lateness. */
    default void requestSent(long atNanos, long request, long dueNanos) {}

    /**
     * A request has its end: its last byte, or its failure.
     *
     * @param cause null for a good answer
     * @param status of the answer, or 0 without one
     */
    default void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {}

    /**
     * A request whose connection had become a tunnel has its end: that of the tunnel. Its latency is that of the answer that
     * opened it.
     *
     * @param openedNanos when that answer was there
     */
    default void tunnelEnded(
            long atNanos,
            long openedNanos,
            long request,
            long dueNanos,
            int traffic,
            int kind,
            @Nullable Cause cause,
            int status) {
        requestEnded(atNanos, request, dueNanos, traffic, kind, cause, status);
    }

    /** A client would have needed one connection more than the cap allows. */
    default void connectionCapHit(long atNanos) {}

    /** The balancer picked a backend; {@code attempt} counts from 1, {@code inFlight} of the backend counts this one. */
    default void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {}

    /** An attempt ended as the balancer sees it; {@code inFlight} no longer counts it. */
    default void attemptEnded(
            long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {}

    /** The balancer could pick nobody. */
    default void nobodyPicked(long atNanos, int pool, long request, int attempt) {}

    /** The balancer asked its rules and its budget for a retry. */
    default void retryAsked(long atNanos, int pool, long request, int attempt, boolean granted) {}

    /** A probe counted. */
    default void probed(long atNanos, int backend, long probe, boolean passed) {}

    /**
     * The balancer counted a reading of a backend's load, or found that it has none to go by.
     *
     * @param number of the reading, counted by the backend
     * @param headroomMilli in thousandths: what the backend's weight is multiplied by from now on
     * @param fresh false where the weight goes back to the one that was set, since readings fail to come
     */
    default void loadRead(long atNanos, int backend, long number, int headroomMilli, boolean fresh) {}

    /** No backend could take a request now, so it waits in the balancer; {@code waiting} in its pool count this one. */
    default void waited(long atNanos, int pool, long request, int waiting) {}

    /** A standing changed. */
    default void stood(Transition transition) {}

    /** A set weight changed: of a backend, or of a host. */
    default void reweighed(long atNanos, boolean host, int number, int weight) {}

    /** A backend read a whole request head; a request below 0 or an attempt of 0 is not of this play. */
    default void backendReceived(long atNanos, int backend, long request, int attempt) {}

    /** A backend is done with a request; not {@code inFull} when its answer was lost, dropped or cut short. */
    default void backendEnded(long atNanos, int backend, long request, int attempt, boolean inFull, int status) {}

    /**
     * A cue was applied. Told before whatever it brings about, also that of the same instant.
     *
     * @param dueNanos when it was due
     * @param by where it came from
     */
    default void cueApplied(long atNanos, long dueNanos, Cue cue, By by) {}

    /** The state of every backend at the end of a slice (each 100 ms, the first at 100 ms). The sample is reused. */
    default void sampled(long atNanos, Sample sample) {}

    /**
     * The play was interrupted: nothing more is sent. Requests that are open when it ends are nobody's failure, and their
     * end is never told.
     */
    default void interrupted(long atNanos) {}

    /** Nothing more comes. {@code complete} unless the play was interrupted. */
    default void ended(long atNanos, boolean complete) {}

    /** Where a cue comes from. */
    enum By {
        /** The drill file. */
        DRILL,
        /** A person, during the play. */
        HAND,
        /** The {@code for:} of an earlier cue ran out. */
        END
    }
}
