package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpMethod;
import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Outcome;

/**
 * The attempts at one request as the Decider counts them.
 *
 * <p>Every backend that was picked is reported as ended exactly once: with the last byte of its answer, or with the
 * failure that came first.
 */
final class Attempts {
    private final PoolFront pool;
    private final HttpMethod method;
    private final Ask ask = new Ask();
    private int backend = Decider.NOBODY;
    private boolean inFlight;
    private int status;

    Attempts(PoolFront pool, HttpMethod method, long number) {
        this.pool = pool;
        this.method = method;
        ask.pool = pool.number();
        ask.request = number;
    }

    /** Picks for the first attempt; gives the backend or {@link Decider#NOBODY}. */
    int pick(int pinned) {
        ask.pinned = pinned;
        backend = pool.decider().pick(ask);
        inFlight = backend != Decider.NOBODY;
        return backend;
    }

    /** Picks a backend that was not tried yet; false if there is none. */
    boolean pickAnother() {
        ask.again(backend);
        ask.pinned = Decider.NOBODY;
        int next = pool.decider().pick(ask);
        if (next == Decider.NOBODY) {
            return false;
        }
        backend = next;
        inFlight = true;
        status = 0;
        return true;
    }

    /** Which attempt this is, from 1. */
    int attempt() {
        return ask.attempt;
    }

    int backend() {
        return backend;
    }

    int status() {
        return status;
    }

    /** The status of the answer whose head came. */
    void status(int given) {
        status = given;
    }

    /** The attempt in flight has ended; nothing happens when none is. */
    void ended(Outcome outcome) {
        if (inFlight) {
            inFlight = false;
            pool.decider().ended(backend, ask.request, ask.attempt, outcome, status);
        }
    }

    /** Whether the drill's rule and the budget grant another attempt after this outcome. */
    boolean mayRetry(Outcome outcome, boolean headSent, boolean replayable) {
        return pool.retries()
                && pool.decider()
                        .retry(
                                pool.number(),
                                ask.request,
                                ask.attempt,
                                outcome,
                                status,
                                RequestCheck.idempotent(method),
                                headSent,
                                replayable);
    }
}
