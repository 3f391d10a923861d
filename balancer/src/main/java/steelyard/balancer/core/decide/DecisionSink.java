package steelyard.balancer.core.decide;

import steelyard.balancer.core.standing.Transition;

/**
 * What the Decider decided, for whoever records it. Called inside the Decider's methods in decision order, at the
 * instant that the method was given; an implementation must not call the Decider back. Every
 * method does nothing unless overridden, so that a sink hears only what it is about.
 */
public interface DecisionSink {
    /** A backend was picked for an attempt. {@code inFlight} counts this one. */
    default void picked(long nowNanos, int pool, int backend, long request, int attempt, int inFlight) {}

    /** No backend could be picked. */
    default void nobody(long nowNanos, int pool, long request, int attempt) {}

    /** An attempt ended. {@code status} is that of the answer, or 0 without one; {@code inFlight} no longer counts it. */
    default void ended(
            long nowNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {}

    /** A retry was asked for; {@code granted} says whether rules and budget allow it. */
    default void retryAsked(long nowNanos, int pool, long request, int attempt, boolean granted) {}

    /** A probe counted. */
    default void probed(long nowNanos, int backend, long probe, boolean passed) {}

    /** The standing of a backend changed in word or in whether it may be picked. */
    default void stood(Transition transition) {}

    /** A try waits for a place; {@code waiting} of the pool wait now, this one included. */
    default void waited(long nowNanos, int pool, long request, int attempt, int waiting) {}

    /**
     * What a backend's load page makes of its weight has been settled.
     *
     * @param number of the reading, or of the last one when it went stale
     * @param headroomMilli thousandths of the set weight; 1000 when nothing fresh is known
     * @param fresh false when readings are missing for so long that the set weight stands
     */
    default void loadRead(long nowNanos, int backend, long number, int headroomMilli, boolean fresh) {}

    /** The set weight of a backend or host was changed. */
    default void reweighed(long nowNanos, boolean host, int number, int weight) {}
}
