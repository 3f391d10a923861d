package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpRequest;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.live.guard.WaitingRoom;

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
    private final WaitingRoom room;
    private boolean inFlight;
    private boolean waiting;
    private boolean left;
    private int status;

    /**
     * @param head prepared for the backend
     * @param room where a try waits when every backend is full
     * @param client the key of the client's address
     */
    Attempts(PoolFront pool, HttpRequest head, long number, WaitingRoom room, long client) {
        this.pool = pool;
        this.method = head.method();
        this.room = room;
        ask.pool = pool.number();
        ask.request = number;
        ask.client = client;
        ask.key = RequestKey.of(pool.settings().pick().hash(), head, client);
        Berths berths = pool.berths();
        if (berths != null) {
            ask.held = berths.held(head.headers());
        }
    }

    /**
     * Picks for the first attempt.
     *
     * @param waiter is told when the answer is {@link Decider#WAITING}
     * @return the backend, {@link Decider#NOBODY} or {@link Decider#WAITING}
     */
    int pick(int pinned, WaitingRoom.Waiter waiter) {
        ask.pinned = pinned;
        return pick(waiter);
    }

    /** Picks a backend that was not tried yet; see {@link #pick(int, WaitingRoom.Waiter)}. */
    int pickAnother(WaitingRoom.Waiter waiter) {
        ask.again(backend);
        ask.pinned = Decider.NOBODY;
        return pick(waiter);
    }

    private int pick(WaitingRoom.Waiter waiter) {
        ask.ticket = room.ticket();
        int picked = pool.decider().pick(ask);
        if (picked == Decider.WAITING) {
            waiting = true;
            room.enter(ask.ticket, placed -> placed(placed, waiter));
        } else {
            take(picked);
        }
        return picked;
    }

    private void placed(int picked, WaitingRoom.Waiter waiter) {
        waiting = false;
        take(picked);
        if (left) {
            ended(Outcome.ABANDONED);
        } else {
            waiter.placed(picked);
        }
    }

    private void take(int picked) {
        if (picked != Decider.NOBODY) {
            backend = picked;
            inFlight = true;
            status = 0;
        }
    }

    /** The client went away. */
    void abandon() {
        left = true;
        if (waiting && pool.decider().leave(ask.ticket)) {
            waiting = false;
            room.leave(ask.ticket);
        }
        ended(Outcome.ABANDONED);
    }

    /**
     * The cookie that the answer has to bring, or null where none holds clients. Every answer brings it, also to a client
     * that has it: how long it lasts counts from the last visit.
     */
    @Nullable
    String cookie() {
        Berths berths = pool.berths();
        return berths == null ? null : berths.field(backend);
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
