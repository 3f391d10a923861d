package steelyard.bench;

import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;

/** Does not record: what a recorder costs is not the balancer's. */
final class DeafSink implements DecisionSink {
    @Override
    public void picked(long nowNanos, int pool, int backend, long request, int attempt, int inFlight) {}

    @Override
    public void nobody(long nowNanos, int pool, long request, int attempt) {}

    @Override
    public void ended(
            long nowNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {}

    @Override
    public void retryAsked(long nowNanos, int pool, long request, int attempt, boolean granted) {}

    @Override
    public void probed(long nowNanos, int backend, long probe, boolean passed) {}

    @Override
    public void stood(Transition transition) {}

    @Override
    public void reweighed(long nowNanos, boolean host, int number, int weight) {}
}
