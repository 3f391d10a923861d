package steelyard.harness.stage.live;

import java.util.Map;
import java.util.concurrent.ConcurrentHashMap;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;

/**
 * Tells the account what the balancer decided. Called inside the balancer's lock, so the order of calls is the order of
 * decisions; a reading of the clock that was overtaken on its way to the lock counts as the one before it.
 */
final class BalancerAccount implements DecisionSink {
    private final Account account;
    private final PlayClock clock;
    private final Map<Long, Outcome> brokenOff = new ConcurrentHashMap<>();
    private long latestNanos = Long.MIN_VALUE;

    BalancerAccount(Account account, PlayClock clock) {
        this.account = account;
        this.clock = clock;
    }

    /**
     * Why an answer that had begun was broken off, if the balancer did it: {@link Outcome#CUT} or {@link Outcome#STALLED}.
     * Forgets it. Any thread; to be called once a request has ended.
     */
    @Nullable
    Outcome takeBrokenOff(long request) {
        return brokenOff.remove(request);
    }

    @Override
    public void picked(long nowNanos, int pool, int backend, long request, int attempt, int inFlight) {
        tell(nowNanos, (to, at) -> to.attemptPicked(at, pool, backend, request, attempt, inFlight));
    }

    @Override
    public void nobody(long nowNanos, int pool, long request, int attempt) {
        tell(nowNanos, (to, at) -> to.nobodyPicked(at, pool, request, attempt));
    }

    @Override
    public void ended(
            long nowNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        if (request >= 0 && (outcome == Outcome.CUT || outcome == Outcome.STALLED)) {
            brokenOff.put(request, outcome);
        }
        tell(nowNanos, (to, at) -> to.attemptEnded(at, backend, request, attempt, outcome, status, inFlight));
    }

    @Override
    public void retryAsked(long nowNanos, int pool, long request, int attempt, boolean granted) {
        tell(nowNanos, (to, at) -> to.retryAsked(at, pool, request, attempt, granted));
    }

    @Override
    public void probed(long nowNanos, int backend, long probe, boolean passed) {
        tell(nowNanos, (to, at) -> to.probed(at, backend, probe, passed));
    }

    @Override
    public void waited(long nowNanos, int pool, long request, int attempt, int waiting) {
        tell(nowNanos, (to, at) -> to.waited(at, pool, request, waiting));
    }

    @Override
    public void loadRead(long nowNanos, int backend, long number, int headroomMilli, boolean fresh) {
        tell(nowNanos, (to, at) -> to.loadRead(at, backend, number, headroomMilli, fresh));
    }

    @Override
    public void stood(Transition change) {
        tell(
                change.atNanos(),
                (to, at) -> to.stood(new Transition(change.backend(), change.from(), change.to(), change.cause(), at)));
    }

    @Override
    public void reweighed(long nowNanos, boolean host, int number, int weight) {
        tell(nowNanos, (to, at) -> to.reweighed(at, host, number, weight));
    }

    private void tell(long nowNanos, Account.Telling telling) {
        latestNanos = Math.max(latestNanos, clock.playNanos(nowNanos));
        account.tell(Account.Source.BALANCER, latestNanos, telling);
    }
}
