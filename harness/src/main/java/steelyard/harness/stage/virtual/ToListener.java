package steelyard.harness.stage.virtual;

import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;
import steelyard.harness.record.PlayListener;

/** Passes decisions on as they are made: on this stage, time is the account's own. */
record ToListener(PlayListener listener) implements DecisionSink {
    @Override
    public void picked(long nowNanos, int pool, int backend, long request, int attempt, int inFlight) {
        listener.attemptPicked(nowNanos, pool, backend, request, attempt, inFlight);
    }

    @Override
    public void nobody(long nowNanos, int pool, long request, int attempt) {
        listener.nobodyPicked(nowNanos, pool, request, attempt);
    }

    @Override
    public void ended(
            long nowNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        listener.attemptEnded(nowNanos, backend, request, attempt, outcome, status, inFlight);
    }

    @Override
    public void retryAsked(long nowNanos, int pool, long request, int attempt, boolean granted) {
        listener.retryAsked(nowNanos, pool, request, attempt, granted);
    }

    @Override
    public void probed(long nowNanos, int backend, long probe, boolean passed) {
        listener.probed(nowNanos, backend, probe, passed);
    }

    @Override
    public void waited(long nowNanos, int pool, long request, int attempt, int waiting) {
        listener.waited(nowNanos, pool, request, waiting);
    }

    @Override
    public void loadRead(long nowNanos, int backend, long number, int headroomMilli, boolean fresh) {
        listener.loadRead(nowNanos, backend, number, headroomMilli, fresh);
    }

    @Override
    public void stood(Transition transition) {
        listener.stood(transition);
    }

    @Override
    public void reweighed(long nowNanos, boolean host, int number, int weight) {
        listener.reweighed(nowNanos, host, number, weight);
    }
}
