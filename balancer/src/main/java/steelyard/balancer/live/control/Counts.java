package steelyard.balancer.live.control;

import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;
import steelyard.balancer.settings.BalancerSettings;

/**
 * Counts decisions on their way to a sink.
 *
 * <p>Written inside the Decider's lock and without a lock of its own: whoever reads does so inside the same lock.
 */
public final class Counts implements DecisionSink {
    private final DecisionSink next;
    private final Figures figures;

    /** @param next is told everything first */
    public Counts(BalancerSettings settings, DecisionSink next) {
        this.next = next;
        this.figures = new Figures(settings);
    }

    /** Copies all figures; called inside the Decider's lock. */
    void copyTo(Figures copy) {
        copy.copyFrom(figures);
    }

    @Override
    public void picked(long nowNanos, int pool, int backend, long request, int attempt, int inFlight) {
        next.picked(nowNanos, pool, backend, request, attempt, inFlight);
        figures.picks[backend]++;
    }

    @Override
    public void nobody(long nowNanos, int pool, long request, int attempt) {
        next.nobody(nowNanos, pool, request, attempt);
        figures.nobody[pool]++;
    }

    @Override
    public void ended(
            long nowNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        next.ended(nowNanos, backend, request, attempt, outcome, status, inFlight);
        figures.outcomes[backend][outcome.ordinal()]++;
    }

    @Override
    public void retryAsked(long nowNanos, int pool, long request, int attempt, boolean granted) {
        next.retryAsked(nowNanos, pool, request, attempt, granted);
        (granted ? figures.retriesGranted : figures.retriesDenied)[pool]++;
    }

    @Override
    public void probed(long nowNanos, int backend, long probe, boolean passed) {
        next.probed(nowNanos, backend, probe, passed);
        (passed ? figures.probesPassed : figures.probesMissed)[backend]++;
    }

    @Override
    public void stood(Transition transition) {
        next.stood(transition);
        figures.transitions[transition.backend()][transition.to().ordinal()]++;
    }

    @Override
    public void waited(long nowNanos, int pool, long request, int attempt, int waiting) {
        next.waited(nowNanos, pool, request, attempt, waiting);
    }

    @Override
    public void loadRead(long nowNanos, int backend, long number, int headroomMilli, boolean fresh) {
        next.loadRead(nowNanos, backend, number, headroomMilli, fresh);
    }

    @Override
    public void reweighed(long nowNanos, boolean host, int number, int weight) {
        next.reweighed(nowNanos, host, number, weight);
        (host ? figures.hostReweighs : figures.reweighs)[number]++;
    }
}
