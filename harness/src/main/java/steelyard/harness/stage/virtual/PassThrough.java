package steelyard.harness.stage.virtual;

import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Outcome;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.virtual.Passages.State;
import steelyard.harness.stage.virtual.Post.Kind;

/**
 * The balancer's side of connections that are passed through: a backend is picked when a connection comes, and whatever the
 * client sends on it goes there until one of the three closes it. Requests on it are the backend's and the client's own
 * affair: they carry no number of an attempt, and none is made again.
 */
final class PassThrough {
    private final PlayListener listener;
    private final Post post;
    private final Decider decider;
    private final Flights flights;
    private final Passages passages;
    private final Streams streams;
    private final Ask ask = new Ask();

    PassThrough(
            PlayListener listener, Post post, Decider decider, Flights flights, Passages passages, Streams streams) {
        this.listener = listener;
        this.post = post;
        this.decider = decider;
        this.flights = flights;
        this.passages = passages;
        this.streams = streams;
    }

    /** Tickets of passages are below 0, those of requests are not. */
    private static long ticket(long token) {
        return ~token;
    }

    // --- from its wish to its opening -------------------------------------------------------------------------------

    /** A client's connection stands. */
    void came(long token, long nowNanos) {
        if (!passages.current(token) || passages.state[Slots.of(token)] != State.COMING) {
            return;
        }
        int passage = Slots.of(token);
        int stream = passages.traffic[passage];
        ask.clear();
        ask.pool = streams.pool(stream);
        ask.request = passages.number[passage];
        ask.ticket = ticket(token);
        if (streams.says(stream)) {
            streams.say(ask, stream, 0, passages.client[passage], Decider.NOBODY);
        }
        int backend = decider.pick(ask, nowNanos);
        if (backend == Decider.WAITING) {
            passages.state[passage] = State.WAITING;
        } else {
            placed(passage, backend, nowNanos);
        }
    }

    /** Whether the ticket of a try that waited is that of a passage. */
    static boolean ownsTicket(long ticket) {
        return ticket < 0;
    }

    void placed(long ticket, int backend, long nowNanos) {
        placed(Slots.of(ticket(ticket)), backend, nowNanos);
    }

    private void placed(int passage, int backend, long nowNanos) {
        if (backend == Decider.NOBODY) {
            breakOff(passage, nowNanos);
        } else {
            passages.backend[passage] = backend;
            passages.state[passage] = State.CONNECTING;
            post.send(Kind.PASSAGE_CONNECT, nowNanos, passages.token(passage), backend);
        }
    }

    /** The balancer's wish for a connection reaches the backend. */
    void connect(VirtualBackends backends, long token, long nowNanos) {
        int passage = Slots.of(token);
        if (!passages.current(token) || passages.state[passage] != State.CONNECTING) {
            return;
        }
        int backend = passages.backend[passage];
        passages.accepted[passage] = backends.listening(backend);
        if (!passages.accepted[passage]) {
            post.send(Kind.PASSAGE_REFUSED, nowNanos, token, backend);
        } else if (streams.rules(passages.traffic[passage]).backendTls()) {
            post.send(Kind.PASSAGE_OPEN_ON_TLS, nowNanos, token, backend);
        } else {
            post.send(Kind.PASSAGE_OPEN, nowNanos, token, backend);
        }
    }

    /** The connection to the backend stands. */
    void opened(long token, long nowNanos) {
        int passage = Slots.of(token);
        if (!passages.current(token) || passages.state[passage] != State.CONNECTING) {
            return;
        }
        passages.state[passage] = State.OPEN;
        if (passages.early[passage]) {
            pass(passage, nowNanos);
        }
    }

    void refused(long token, long nowNanos) {
        int passage = Slots.of(token);
        if (passages.current(token) && passages.state[passage] == State.CONNECTING) {
            end(passage, Outcome.REFUSED, nowNanos);
            breakOff(passage, nowNanos);
        }
    }

    // --- requests on it ---------------------------------------------------------------------------------------------

    /** A request reaches the balancer. */
    void arrived(int flight, long nowNanos) {
        int passage = flights.passage[flight];
        switch (passages.state[passage]) {
            case COMING, WAITING, CONNECTING -> passages.early[passage] = true;
            case OPEN -> pass(passage, nowNanos);
            case FREE, ENDING, OVER -> {
                // Its client hears of the end.
            }
        }
    }

    private void pass(int passage, long nowNanos) {
        int flight = passages.flight[passage];
        passages.early[passage] = false;
        flights.passed(flight, passages.backend[passage]);
        post.send(Kind.PASSED, nowNanos, flights.token(flight), passages.backend[passage]);
    }

    /** A request reaches the backend. */
    void read(VirtualBackends backends, long token, long nowNanos) {
        int flight = Slots.of(token);
        if (!flights.current(token) || !passages.accepted[flights.passage[flight]]) {
            return;
        }
        int backend = flights.backend[flight];
        long request = flights.request[flight];
        listener.backendReceived(nowNanos, backend, request, 0);
        flights.place[flight] = backends.arrive(backend, token, request, 0, nowNanos);
    }

    /** Whether an answer from the backend still finds its way to the client. */
    boolean carries(int flight) {
        return passages.state[flights.passage[flight]] == State.OPEN;
    }

    // --- ends -------------------------------------------------------------------------------------------------------

    /** The client's end of the connection reaches the balancer. */
    void left(long token, long nowNanos) {
        int passage = Slots.of(token);
        if (!passages.current(token)) {
            return;
        }
        switch (passages.state[passage]) {
            case WAITING -> leave(passage, nowNanos);
            case CONNECTING -> end(passage, Outcome.ABANDONED, nowNanos);
            case OPEN -> {
                closeBackend(passage, nowNanos);
                post.send(Kind.PASSAGE_ENDED, nowNanos, token, passages.backend[passage]);
            }
            case FREE, COMING, ENDING, OVER -> {
                // Nothing stands behind it.
            }
        }
        freeRequest(passage);
        if (passages.state[passage] == State.OPEN) {
            passages.state[passage] = State.ENDING;
        } else {
            passages.free(passage);
        }
    }

    /** The request of a client that has gone; an answer on its way to it frees it by itself. */
    private void freeRequest(int passage) {
        int flight = passages.flight[passage];
        passages.flight[passage] = Passages.NONE;
        if (flight >= 0 && flights.state[flight] != Flights.State.TO_CLIENT) {
            flights.free(flight);
        }
    }

    private void leave(int passage, long nowNanos) {
        if (!decider.leave(ticket(passages.token(passage)), nowNanos)) {
            throw new IllegalStateException("connection " + passages.number[passage] + " was not waiting");
        }
    }

    /** The backend has closed its side too. */
    void ended(long token, long nowNanos) {
        int passage = Slots.of(token);
        if (passages.current(token) && passages.state[passage] == State.ENDING) {
            end(passage, Outcome.ANSWERED, nowNanos);
            passages.free(passage);
        }
    }

    /** A backend died: the ends of its connections break. */
    void connectionsReset(int backend, long atNanos) {
        for (int passage = 0; passage < passages.used(); passage++) {
            if (passages.on(passage, backend) && passages.accepted[passage]) {
                passages.accepted[passage] = false;
                post.send(Kind.PASSAGE_RESET, atNanos, passages.token(passage), backend);
            }
        }
    }

    void reset(long token, long nowNanos) {
        int passage = Slots.of(token);
        if (passages.current(token) && passages.on(passage, passages.backend[passage])) {
            end(passage, Outcome.BROKEN, nowNanos);
            breakOff(passage, nowNanos);
        }
    }

    void cutAll(int backend, long nowNanos) {
        for (int passage = 0; passage < passages.used(); passage++) {
            if (passages.on(passage, backend)) {
                closeBackend(passage, nowNanos);
                end(passage, Outcome.CUT, nowNanos);
                breakOff(passage, nowNanos);
            }
        }
    }

    /** Interrupted: the balancer knows at once. */
    void abandonAll(long nowNanos) {
        for (int passage = 0; passage < passages.used(); passage++) {
            if (passages.state[passage] == State.WAITING) {
                leave(passage, nowNanos);
                passages.over(passage);
            }
        }
        for (int passage = 0; passage < passages.used(); passage++) {
            if (passages.on(passage, passages.backend[passage])) {
                end(passage, Outcome.ABANDONED, nowNanos);
                passages.over(passage);
            }
        }
    }

    private void end(int passage, Outcome outcome, long nowNanos) {
        decider.ended(passages.backend[passage], passages.number[passage], 1, outcome, 0, nowNanos);
    }

    /** The backend learns that nobody waits for an answer any more. */
    private void closeBackend(int passage, long nowNanos) {
        int flight = passages.flight[passage];
        if (flight >= 0 && flights.place[flight] >= 0) {
            long where = (long) passages.backend[passage] << Integer.SIZE | flights.place[flight];
            post.send(Kind.ATTEMPT_GONE, nowNanos, flights.token(flight), where);
        }
    }

    /** The client learns that its connection is no more, unless it has closed it itself. */
    private void breakOff(int passage, long nowNanos) {
        if (passages.state[passage] == State.ENDING) {
            passages.free(passage);
        } else {
            passages.over(passage);
            post.send(Kind.PASSAGE_BROKEN, nowNanos, passages.token(passage), 0);
        }
    }
}
