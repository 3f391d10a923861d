package steelyard.balancer.live;

import java.util.ArrayList;
import java.util.List;
import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;

/** Remembers decisions. Written inside the balancer's lock, read from the test's thread. */
final class Decisions implements DecisionSink {
    private final List<Pick> picks = new ArrayList<>();
    private final List<End> ends = new ArrayList<>();
    private final List<Transition> transitions = new ArrayList<>();
    private final List<Boolean> retries = new ArrayList<>();
    private final List<Boolean> probes = new ArrayList<>();
    private final List<Boolean> fresh = new ArrayList<>();
    private int headroomMilli = -1;
    private int waited;
    private int nobody;

    record Pick(int backend, long request, int attempt) {}

    record End(int backend, long request, int attempt, Outcome outcome, int status) {}

    @Override
    public synchronized void picked(long nowNanos, int pool, int backend, long request, int attempt, int inFlight) {
        picks.add(new Pick(backend, request, attempt));
    }

    @Override
    public synchronized void nobody(long nowNanos, int pool, long request, int attempt) {
        nobody++;
    }

    @Override
    public synchronized void ended(
            long nowNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        ends.add(new End(backend, request, attempt, outcome, status));
    }

    @Override
    public synchronized void retryAsked(long nowNanos, int pool, long request, int attempt, boolean granted) {
        retries.add(granted);
    }

    @Override
    public synchronized void probed(long nowNanos, int backend, long probe, boolean passed) {
        probes.add(passed);
    }

    @Override
    public synchronized void stood(Transition transition) {
        transitions.add(transition);
    }

    @Override
    public synchronized void waited(long nowNanos, int pool, long request, int attempt, int waiting) {
        waited++;
    }

    @Override
    public synchronized void loadRead(long nowNanos, int backend, long number, int headroom, boolean isFresh) {
        fresh.add(isFresh);
        headroomMilli = headroom;
    }

    @Override
    public void reweighed(long nowNanos, boolean host, int number, int weight) {
        // no test of the live side asks for it
    }

    synchronized List<Pick> picks() {
        return List.copyOf(picks);
    }

    synchronized List<End> ends() {
        return List.copyOf(ends);
    }

    synchronized List<Outcome> outcomes() {
        return ends.stream().map(End::outcome).toList();
    }

    synchronized List<Transition> transitions() {
        return List.copyOf(transitions);
    }

    synchronized List<Boolean> retries() {
        return List.copyOf(retries);
    }

    synchronized List<Boolean> probes() {
        return List.copyOf(probes);
    }

    synchronized int waited() {
        return waited;
    }

    synchronized List<Boolean> fresh() {
        return List.copyOf(fresh);
    }

    /** As of the last reading; -1 before it. */
    synchronized int headroomMilli() {
        return headroomMilli;
    }

    synchronized int nobody() {
        return nobody;
    }
}
