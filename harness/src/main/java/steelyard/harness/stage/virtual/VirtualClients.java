package steelyard.harness.stage.virtual;

import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Traffic;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.virtual.Post.Kind;

/** The open-loop clients: send requests on connections of their own, read results, give up, keep cookies. */
final class VirtualClients {
    private static final Cause[] CAUSES = Cause.values();
    private static final int FIRST_SERVER_ERROR = 500;

    private final PlayListener listener;
    private final Post post;
    private final Flights flights;
    private final Streams streams;
    private final List<Traffic> traffic;
    private final Connections connections;
    private final PassageClients passages;
    private final Tunnels tunnels;
    private final Berths berths;
    private final Lane[] giveUps;
    /** Whether any client closes anything at an instant that matters. */
    private final boolean closes;

    private long nextNanos = Lane.NEVER;

    VirtualClients(
            PlayListener listener,
            Post post,
            Flights flights,
            Passages passages,
            Streams streams,
            Drill drill,
            long idleLimitNanos) {
        this.listener = listener;
        this.post = post;
        this.flights = flights;
        this.streams = streams;
        this.traffic = drill.traffic();
        connections = new Connections(traffic, drill.stage().connections(), idleLimitNanos);
        this.passages = new PassageClients(post, flights, passages, connections, streams, idleLimitNanos);
        tunnels = new Tunnels(post, flights, traffic);
        berths = new Berths(traffic, streams);
        closes = streams.anyOctets() || tunnels.any();
        giveUps = traffic.stream().map(each -> new Lane(each.giveUpNanos())).toArray(Lane[]::new);
    }

    // --- sending ----------------------------------------------------------------------------------------------------

    void send(long request, long dueNanos, int stream, int kind, int client, long nowNanos) {
        listener.requestDue(nowNanos, request, stream, kind, client);
        PoolRules rules = streams.rules(stream);
        if (rules.octets()) {
            passages.poll(nowNanos);
        }
        int connection = connections.take(stream, client, nowNanos);
        if (connection < 0) {
            listener.connectionCapHit(nowNanos);
            listener.requestEnded(nowNanos, request, dueNanos, stream, kind, Cause.GAVE_UP, 0);
            return;
        }
        listener.requestSent(nowNanos, request, dueNanos);
        int flight = flights.take(request, dueNanos, stream, kind, client, connection);
        boolean fresh = connections.fresh();
        if (rules.octets()) {
            passages.sent(flight, fresh, nowNanos);
        } else if (rules.berthNanos() > 0) {
            flights.held[flight] = berths.held(stream, client, nowNanos);
        }
        post.send(fresh ? onNew(rules) : Kind.REQUEST, nowNanos, flights.token(flight), 0);
        limit(giveUps[stream], request, flight, nowNanos);
    }

    private static Kind onNew(PoolRules rules) {
        return rules.frontTls() ? Kind.REQUEST_ON_TLS : Kind.REQUEST_ON_NEW;
    }

    /** Notes when a client gives up. Those at the front whose requests are over go, so that the rest stay few. */
    private void limit(Lane lane, long request, int flight, long nowNanos) {
        while (!lane.isEmpty() && !flights.waits((int) lane.where(), lane.what())) {
            lane.drop();
        }
        lane.send(nowNanos, request, flight, 0);
        findNext();
    }

    // --- time -------------------------------------------------------------------------------------------------------

    long nextNanos() {
        return nextNanos;
    }

    private void findNext() {
        long next = closes ? Math.min(passages.nextNanos(), tunnels.nextNanos()) : Lane.NEVER;
        for (Lane lane : giveUps) {
            next = Math.min(next, lane.nextNanos());
        }
        nextNanos = next;
    }

    /** Lets the clients give up whose time is over, and close what has stood or been idle long enough. */
    void poll(long nowNanos) {
        if (nowNanos != nextNanos) {
            return;
        }
        for (Lane lane : giveUps) {
            while (lane.nextNanos() == nowNanos) {
                long request = lane.what();
                int flight = (int) lane.where();
                lane.drop();
                if (flights.waits(flight, request)) {
                    giveUp(flight, nowNanos);
                }
            }
        }
        passages.poll(nowNanos);
        tunnels.poll(nowNanos);
        findNext();
    }

    /** Giving up closes the connection; the balancer learns of it a hop later. */
    private void giveUp(int flight, long nowNanos) {
        end(flight, Cause.GAVE_UP, 0, nowNanos);
        connections.close(flights.connection[flight]);
        if (streams.rules(flights.traffic[flight]).octets()) {
            passages.giveUp(flight, nowNanos);
        } else {
            post.send(Kind.CLIENT_GONE, nowNanos, flights.request[flight], flight);
        }
    }

    /** Nothing more is sent: what is idle is closed where that ends something in flight. */
    void closeIdle(long nowNanos) {
        passages.closeIdle(nowNanos);
    }

    // --- results ----------------------------------------------------------------------------------------------------

    /** The balancer's answer has come. */
    void result(int flight, long nowNanos) {
        boolean waited = !flights.told[flight];
        boolean kept = waited && !flights.closes[flight];
        int connection = flights.connection[flight];
        if (waited) {
            int status = flights.status[flight];
            end(flight, cause(flight, status), status, nowNanos);
            if (kept) {
                connections.idle(connection, nowNanos);
            } else {
                connections.close(connection);
            }
        }
        PoolRules rules = streams.rules(flights.traffic[flight]);
        if (rules.octets()) {
            passages.answered(flight, kept, nowNanos);
            findNext();
        } else if (rules.berthNanos() > 0 && waited && flights.cause[flight] < 0) {
            berths.answered(flights.traffic[flight], flights.client[flight], flights.backend[flight], nowNanos);
        }
        flights.free(flight);
    }

    /** A client learns that its tunnel stands. */
    void opened(long token, long nowNanos) {
        tunnels.opened(token, nowNanos);
        findNext();
    }

    /** A connection that is passed through has broken. */
    void broken(long token, long nowNanos) {
        int flight = passages.broken(token);
        if (flight >= 0) {
            end(flight, Cause.RESET, 0, nowNanos);
            flights.free(flight);
        }
    }

    /** The cause that the balancer gave, or what the status of a backend's answer means. */
    private @Nullable Cause cause(int flight, int status) {
        if (flights.cause[flight] >= 0) {
            return CAUSES[flights.cause[flight]];
        }
        Traffic.Request asks = traffic.get(flights.traffic[flight]).requests().get(flights.kind[flight]);
        return isGood(asks, status) ? null : Cause.BACKEND_ERROR;
    }

    private static boolean isGood(Traffic.Request asks, int status) {
        if (asks.upgrade() != null) {
            return status == Attempts.SWITCHING;
        }
        Set<Integer> good = asks.good();
        return good.isEmpty() ? status < FIRST_SERVER_ERROR : good.contains(status);
    }

    private void end(int flight, @Nullable Cause cause, int status, long nowNanos) {
        flights.told[flight] = true;
        if (flights.openedNanos[flight] != Lane.NEVER) {
            endTunnel(flight, cause, status, nowNanos);
            return;
        }
        listener.requestEnded(
                nowNanos,
                flights.request[flight],
                flights.dueNanos[flight],
                flights.traffic[flight],
                flights.kind[flight],
                cause,
                status);
    }

    private void endTunnel(int flight, @Nullable Cause cause, int status, long nowNanos) {
        listener.tunnelEnded(
                nowNanos,
                flights.openedNanos[flight],
                flights.request[flight],
                flights.dueNanos[flight],
                flights.traffic[flight],
                flights.kind[flight],
                cause,
                status);
        flights.openedNanos[flight] = Lane.NEVER;
    }

    // --- connections ------------------------------------------------------------------------------------------------

    /** The backend that a flight's connection follows, or nobody. */
    int pinned(int flight) {
        return connections.pinned(flights.connection[flight]);
    }

    void pin(int flight, int backend) {
        connections.pin(flights.connection[flight], backend);
    }
}
