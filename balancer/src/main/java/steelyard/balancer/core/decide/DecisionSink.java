package steelyard.balancer.core.decide;

import steelyard.balancer.core.standing.Transition;

/**
 * What the Decider decided, for whoever records it. Called inside the Decider's methods in decision order, at the
 * instant that the method was given; an implementation must not call the Decider back.
 */
public interface DecisionSink {
    /** A backend was picked for an attempt. {@code inFlight} counts this one. */
    void picked(long nowNanos, int pool, int backend, long request, int attempt, int inFlight);

    /** No backend could be picked. */
    void nobody(long nowNanos, int pool, long request, int attempt);

    /** An attempt ended. {@code status} is that of the answer, or 0 without one; {@code inFlight} no longer counts it. */
    void ended(long nowNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight);

    /** A retry was asked for; {@code granted} says whether rules and budget allow it. */
    void retryAsked(long nowNanos, int pool, long request, int attempt, boolean granted);

    /** A probe counted. */
    void probed(long nowNanos, int backend, long probe, boolean passed);

    /** The standing of a backend changed in word or in whether it may be picked. */
    void stood(Transition transition);

    /** The set weight of a backend or host was changed. */
    void reweighed(long nowNanos, boolean host, int number, int weight);
}
