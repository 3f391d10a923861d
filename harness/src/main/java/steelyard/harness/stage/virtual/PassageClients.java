package steelyard.harness.stage.virtual;

import steelyard.harness.stage.virtual.Post.Kind;

/**
 * The clients' side of connections that are passed through: unlike others, their closing is an event, since it ends what is
 * in flight.
 */
final class PassageClients {
    private final Post post;
    private final Flights flights;
    private final Passages passages;
    private final Connections connections;
    private final Streams streams;
    /** When idle ones are closed; one that was taken up in the meantime is not. */
    private final Lane idle;

    PassageClients(
            Post post,
            Flights flights,
            Passages passages,
            Connections connections,
            Streams streams,
            long idleLimitNanos) {
        this.post = post;
        this.flights = flights;
        this.passages = passages;
        this.connections = connections;
        this.streams = streams;
        idle = new Lane(idleLimitNanos);
    }

    long nextNanos() {
        return idle.nextNanos();
    }

    /** Closes what has been idle too long. */
    void poll(long nowNanos) {
        while (idle.nextNanos() <= nowNanos) {
            int connection = (int) idle.what();
            long sinceNanos = idle.where();
            idle.drop();
            if (connections.idleSince(connection, sinceNanos)) {
                connections.closeIdle(connection);
                leave(connections.passage(connection), nowNanos);
            }
        }
    }

    /** The play is over: closes what is idle. */
    void closeIdle(long nowNanos) {
        for (int passage = 0; passage < passages.used(); passage++) {
            if (passages.state[passage] != Passages.State.FREE
                    && !passages.left[passage]
                    && passages.flight[passage] == Passages.NONE) {
                connections.closeIdle(passages.connection[passage]);
                leave(passage, nowNanos);
            }
        }
    }

    /** A request goes out on a connection, which may be a new one. */
    void sent(int flight, boolean fresh, long nowNanos) {
        int stream = flights.traffic[flight];
        int connection = flights.connection[flight];
        if (fresh) {
            int passage = passages.open(stream, flights.client[flight], connection);
            connections.passes(connection, passage);
            Kind how = streams.rules(stream).frontTls() ? Kind.PASSAGE_ON_TLS : Kind.PASSAGE;
            post.send(how, nowNanos, passages.token(passage), 0);
        }
        int passage = connections.passage(connection);
        flights.passage[flight] = passage;
        passages.flight[passage] = flight;
    }

    /** An answer has come, and the connection is idle unless the client has given it up. */
    void answered(int flight, boolean kept, long nowNanos) {
        int passage = flights.passage[flight];
        if (passages.flight[passage] == flight) {
            passages.flight[passage] = Passages.NONE;
        }
        if (kept) {
            idle.send(nowNanos, flights.connection[flight], nowNanos, 0);
        }
    }

    /** A client closes a connection whose answer it no longer waits for. */
    void giveUp(int flight, long nowNanos) {
        leave(flights.passage[flight], nowNanos);
    }

    private void leave(int passage, long nowNanos) {
        passages.left[passage] = true;
        post.send(Kind.PASSAGE_LEFT, nowNanos, passages.token(passage), 0);
    }

    /**
     * A connection has broken.
     *
     * @return the flight of the request on it, which has failed and is the caller's to end, or -1 when there is none
     */
    int broken(long token) {
        int passage = Slots.of(token);
        if (!passages.current(token) || passages.left[passage]) {
            // The client has closed it meanwhile, and the balancer is about to learn of that.
            return Passages.NONE;
        }
        int flight = passages.flight[passage];
        if (flight == Passages.NONE) {
            connections.closeIdle(passages.connection[passage]);
        } else {
            connections.close(passages.connection[passage]);
        }
        passages.free(passage);
        return flight;
    }
}
