package steelyard.harness.stage.virtual;

import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Cause;
import steelyard.harness.stage.virtual.Flights.State;
import steelyard.harness.stage.virtual.Post.Kind;

/**
 * The balancer's side towards clients: a request from its arrival, over its attempts, to the answer that it gets or the
 * client that goes away.
 */
final class Exchanges {
    private static final int BAD_GATEWAY = 502;
    private static final int UNAVAILABLE = 503;
    private static final int GATEWAY_TIMEOUT = 504;

    private final Post post;
    private final Decider decider;
    private final Flights flights;
    private final Streams streams;
    private final Attempts attempts;

    Exchanges(Post post, Decider decider, Flights flights, Streams streams, Attempts attempts) {
        this.post = post;
        this.decider = decider;
        this.flights = flights;
        this.streams = streams;
        this.attempts = attempts;
    }

    /** A request reaches the balancer. */
    void arrived(long token, long nowNanos) {
        int flight = Flights.flightOf(token);
        if (!flights.current(token) || flights.told[flight]) {
            // Its client gave up meanwhile, and the balancer may know it already.
            return;
        }
        if (!attempts.begin(flight, nowNanos)) {
            reply(flight, UNAVAILABLE, Cause.NO_BACKEND, nowNanos);
        }
    }

    /** The client closed its connection: an attempt under way is given up, an answer on its way finds nobody. */
    void gone(int flight, long nowNanos) {
        switch (flights.state[flight]) {
            case TO_BALANCER -> flights.free(flight);
            case ATTEMPTED -> {
                attempts.close(flight, nowNanos);
                attempts.end(flight, Outcome.ABANDONED, 0, nowNanos);
                flights.free(flight);
            }
            case TO_CLIENT -> {
                // Its result frees it.
            }
            case FREE -> throw new IllegalStateException("flight " + flight + " is over");
        }
    }

    /** Interrupted: everybody gives up, and the balancer knows at once. */
    void abandonAll(long nowNanos) {
        for (int flight = 0; flight < flights.used(); flight++) {
            if (flights.state[flight] == State.ATTEMPTED) {
                attempts.end(flight, Outcome.ABANDONED, 0, nowNanos);
                flights.free(flight);
            }
        }
    }

    /** An answer of a backend is there. */
    void answered(long token, int status, long nowNanos) {
        if (!flights.current(token)) {
            return;
        }
        int flight = Flights.flightOf(token);
        int backend = flights.backend[flight];
        attempts.answered(flight, status, nowNanos);
        if (!retriesAnswer(flight, status, nowNanos)) {
            flights.closes[flight] = decider.saysClose(backend);
            flights.replied(flight, status, -1);
            post.send(Kind.RESULT, nowNanos, flights.token(flight), 0);
        }
    }

    private boolean retriesAnswer(int flight, int status, long nowNanos) {
        return streams.rules(flights.traffic[flight]).asksAbout(flights.attempt[flight], status)
                && retries(flight, Outcome.ANSWERED, status, true, nowNanos);
    }

    /** The connection of an attempt was reset. */
    void reset(long token, long nowNanos) {
        if (flights.current(token)) {
            failed(Flights.flightOf(token), Outcome.RESET, BAD_GATEWAY, Cause.RESET, true, nowNanos);
        }
    }

    /** A backend took no connection. */
    void refused(long token, long nowNanos) {
        if (flights.current(token)) {
            failed(Flights.flightOf(token), Outcome.REFUSED, BAD_GATEWAY, Cause.REFUSED, false, nowNanos);
        }
    }

    /** No first byte came in time. */
    void late(int flight, long nowNanos) {
        attempts.close(flight, nowNanos);
        failed(flight, Outcome.LATE, GATEWAY_TIMEOUT, Cause.GATEWAY_TIMEOUT, true, nowNanos);
    }

    /** Cuts whatever a backend has in flight. */
    void cutAll(int backend, long nowNanos) {
        for (int flight = 0; flight < flights.used(); flight++) {
            if (flights.attemptOn(flight, backend)) {
                attempts.close(flight, nowNanos);
                failed(flight, Outcome.CUT, UNAVAILABLE, Cause.CUT, true, nowNanos);
            }
        }
    }

    /** An attempt failed: another one is made, or the client told. */
    private void failed(int flight, Outcome outcome, int status, Cause cause, boolean headSent, long nowNanos) {
        attempts.end(flight, outcome, 0, nowNanos);
        boolean asks = streams.rules(flights.traffic[flight]).retries();
        if (!asks || !retries(flight, outcome, 0, headSent, nowNanos)) {
            reply(flight, status, cause, nowNanos);
        }
    }

    private boolean retries(int flight, Outcome outcome, int status, boolean headSent, long nowNanos) {
        int stream = flights.traffic[flight];
        boolean granted = decider.retry(
                streams.pool(stream),
                flights.request[flight],
                flights.attempt[flight],
                outcome,
                status,
                streams.idempotent(stream, flights.kind[flight]),
                headSent,
                true,
                nowNanos);
        return granted && attempts.begin(flight, nowNanos);
    }

    private void reply(int flight, int status, Cause cause, long nowNanos) {
        flights.replied(flight, status, cause.ordinal());
        post.send(Kind.RESULT, nowNanos, flights.token(flight), 0);
    }
}
