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
    private final PassThrough passThrough;

    Exchanges(
            Post post, Decider decider, Flights flights, Streams streams, Attempts attempts, PassThrough passThrough) {
        this.post = post;
        this.decider = decider;
        this.flights = flights;
        this.streams = streams;
        this.attempts = attempts;
        this.passThrough = passThrough;
    }

    /** A request reaches the balancer. */
    void arrived(long token, long nowNanos) {
        int flight = Slots.of(token);
        if (!flights.current(token) || flights.told[flight]) {
            // Its client gave up meanwhile, and the balancer may know it already.
            return;
        }
        if (streams.rules(flights.traffic[flight]).octets()) {
            passThrough.arrived(flight, nowNanos);
            return;
        }
        flights.note(flight, UNAVAILABLE, Cause.NO_BACKEND.ordinal());
        if (!attempts.begin(flight, nowNanos)) {
            reply(flight, nowNanos);
        }
    }

    /** What waited has a backend, or has waited too long. */
    void placed(long ticket, int backend, long nowNanos) {
        if (PassThrough.ownsTicket(ticket)) {
            passThrough.placed(ticket, backend, nowNanos);
            return;
        }
        int flight = Slots.of(ticket);
        if (backend == Decider.NOBODY) {
            reply(flight, nowNanos);
        } else {
            attempts.placed(flight, backend, nowNanos);
        }
    }

    /** The client closed its connection: an attempt under way is given up, an answer on its way finds nobody. */
    void gone(int flight, long nowNanos) {
        switch (flights.state[flight]) {
            case TO_BALANCER -> flights.free(flight);
            case WAITING -> {
                leave(flight, nowNanos);
                flights.free(flight);
            }
            case ATTEMPTED, TUNNEL -> {
                attempts.close(flight, nowNanos);
                attempts.end(flight, Outcome.ABANDONED, 0, nowNanos);
                flights.free(flight);
            }
            case TO_CLIENT -> {
                // Its result frees it.
            }
            case FREE, PASSED -> throw new IllegalStateException("flight " + flight + " is over");
        }
    }

    private void leave(int flight, long nowNanos) {
        if (!decider.leave(flights.token(flight), nowNanos)) {
            throw new IllegalStateException("request " + flights.request[flight] + " was not waiting");
        }
    }

    /** Interrupted: everybody gives up, and the balancer knows at once. */
    void abandonAll(long nowNanos) {
        passThrough.abandonAll(nowNanos);
        for (int flight = 0; flight < flights.used(); flight++) {
            if (flights.state[flight] == State.WAITING) {
                leave(flight, nowNanos);
                flights.free(flight);
            }
        }
        for (int flight = 0; flight < flights.used(); flight++) {
            if (flights.state[flight] == State.ATTEMPTED || flights.state[flight] == State.TUNNEL) {
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
        int flight = Slots.of(token);
        if (flights.state[flight] == State.PASSED) {
            passOn(flight, status, nowNanos);
        } else if (status == Attempts.SWITCHING) {
            flights.tunnel(flight);
            post.send(Kind.TUNNEL_OPENED, nowNanos, flights.token(flight), 0);
        } else {
            answered(flight, status, nowNanos);
        }
    }

    private void passOn(int flight, int status, long nowNanos) {
        if (passThrough.carries(flight)) {
            flights.note(flight, status, -1);
            reply(flight, nowNanos);
        }
    }

    private void answered(int flight, int status, long nowNanos) {
        int backend = flights.backend[flight];
        attempts.answered(flight, status, nowNanos);
        flights.note(flight, status, -1);
        flights.closes[flight] = decider.saysClose(backend);
        if (!retriesAnswer(flight, status, nowNanos)) {
            reply(flight, nowNanos);
        }
    }

    private boolean retriesAnswer(int flight, int status, long nowNanos) {
        return streams.rules(flights.traffic[flight]).asksAbout(flights.attempt[flight], status)
                && retries(flight, Outcome.ANSWERED, status, true, nowNanos);
    }

    /** The connection of an attempt was reset; that of a passage is told by itself. */
    void reset(long token, long nowNanos) {
        int flight = Slots.of(token);
        if (!flights.current(token) || flights.state[flight] == State.PASSED) {
            return;
        }
        if (flights.state[flight] == State.TUNNEL) {
            tunnelEnds(flight, Outcome.BROKEN, Cause.RESET.ordinal(), nowNanos);
        } else {
            failed(flight, Outcome.RESET, BAD_GATEWAY, Cause.RESET, true, nowNanos);
        }
    }

    /** A tunnel has come to its own end, both ways. */
    void tunnelEnded(long token, long nowNanos) {
        if (flights.current(token)) {
            tunnelEnds(Slots.of(token), Outcome.ANSWERED, -1, nowNanos);
        }
    }

    private void tunnelEnds(int flight, Outcome outcome, int cause, long nowNanos) {
        attempts.end(flight, outcome, Attempts.SWITCHING, nowNanos);
        flights.note(flight, Attempts.SWITCHING, cause);
        flights.closes[flight] = true;
        reply(flight, nowNanos);
    }

    /** A backend took no connection. */
    void refused(long token, long nowNanos) {
        if (flights.current(token)) {
            failed(Slots.of(token), Outcome.REFUSED, BAD_GATEWAY, Cause.REFUSED, false, nowNanos);
        }
    }

    /** No first byte came in time. */
    void late(int flight, long nowNanos) {
        attempts.close(flight, nowNanos);
        failed(flight, Outcome.LATE, GATEWAY_TIMEOUT, Cause.GATEWAY_TIMEOUT, true, nowNanos);
    }

    /** Cuts whatever a backend has in flight. */
    void cutAll(int backend, long nowNanos) {
        passThrough.cutAll(backend, nowNanos);
        for (int flight = 0; flight < flights.used(); flight++) {
            if (flights.attemptOn(flight, backend)) {
                attempts.close(flight, nowNanos);
                failed(flight, Outcome.CUT, UNAVAILABLE, Cause.CUT, true, nowNanos);
            } else if (flights.tunnelOn(flight, backend)) {
                tunnelEnds(flight, Outcome.CUT, Cause.CUT.ordinal(), nowNanos);
            }
        }
    }

    /** An attempt failed: another one is made, or the client told. */
    private void failed(int flight, Outcome outcome, int status, Cause cause, boolean headSent, long nowNanos) {
        attempts.end(flight, outcome, 0, nowNanos);
        flights.note(flight, status, cause.ordinal());
        flights.closes[flight] = false;
        boolean asks = streams.rules(flights.traffic[flight]).retries();
        if (!asks || !retries(flight, outcome, 0, headSent, nowNanos)) {
            reply(flight, nowNanos);
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

    /** The client gets what was noted. */
    private void reply(int flight, long nowNanos) {
        flights.replied(flight);
        post.send(Kind.RESULT, nowNanos, flights.token(flight), 0);
    }
}
