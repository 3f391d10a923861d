package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpResponse;
import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.live.guard.WaitingRoom;
import steelyard.balancer.settings.RetrySettings;

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
     * @param head prepared for the backend, and given a number here unless it has one
     * @param room where a try waits when every backend is full
     * @param client the key of the client's address
     */
    Attempts(PoolFront pool, HttpRequest head, WaitingRoom room, long client) {
        this.pool = pool;
        this.method = head.method();
        this.room = room;
        ask.pool = pool.number();
        ask.request = number(head, pool);
        ask.client = client;
        ask.key = RequestKey.of(pool.settings().pick().hash(), head, client);
        Berths berths = pool.berths();
        if (berths != null) {
            ask.held = berths.held(head.headers());
        }
    }

    private static long number(HttpRequest head, PoolFront pool) {
        long number = pool.numbers().of(head.headers());
        if (number < 0) { // of our own; one that was given stands there already
            head.headers().set(Fields.REQUEST, Long.toString(number));
        }
        return number;
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

    /** Which attempt this is, from 1. */
    int attempt() {
        return ask.attempt;
    }

    int backend() {
        return backend;
    }

    /**
     * The head of an answer came. It is given the cookie that holds the client where one does: every answer brings it, also
     * to a client that has it, as how long it lasts counts from the last visit.
     */
    void answered(HttpResponse response) {
        status = response.status().code();
        Berths berths = pool.berths();
        if (berths != null) {
            response.headers().add(HttpHeaderNames.SET_COOKIE, berths.field(backend));
        }
    }

    /** Whether the drill has an answer of this status tried elsewhere, as long as attempts are left. */
    boolean triesElsewhere(int answered) {
        RetrySettings retry = pool.settings().retry();
        return retry != null && retry.also().contains(answered) && ask.attempt <= retry.atMost();
    }

    /** Whether the answer should tell the client to close its connection. */
    boolean saysClose() {
        return pool.decider().saysClose(backend);
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
