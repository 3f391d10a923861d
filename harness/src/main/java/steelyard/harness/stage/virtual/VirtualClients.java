package steelyard.harness.stage.virtual;

import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Traffic;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.virtual.Post.Kind;

/** The open-loop clients: send requests on connections of their own, read results, give up. */
final class VirtualClients {
    private static final Cause[] CAUSES = Cause.values();
    private static final int FIRST_SERVER_ERROR = 500;

    private final PlayListener listener;
    private final Post post;
    private final Flights flights;
    private final List<Traffic> traffic;
    private final Connections connections;
    private final Lane[] giveUps;
    private long nextNanos = Lane.NEVER;

    VirtualClients(PlayListener listener, Post post, Flights flights, Drill drill, long idleLimitNanos) {
        this.listener = listener;
        this.post = post;
        this.flights = flights;
        this.traffic = drill.traffic();
        connections = new Connections(traffic, drill.stage().connections(), idleLimitNanos);
        giveUps = traffic.stream().map(each -> new Lane(each.giveUpNanos())).toArray(Lane[]::new);
    }

    void send(long request, long dueNanos, int stream, int kind, int client, long nowNanos) {
        listener.requestDue(nowNanos, request, stream, kind, client);
        int connection = connections.take(stream, client, nowNanos);
        if (connection < 0) {
            listener.connectionCapHit(nowNanos);
            listener.requestEnded(nowNanos, request, dueNanos, stream, kind, Cause.GAVE_UP, 0);
            return;
        }
        listener.requestSent(nowNanos, request, dueNanos);
        int flight = flights.take(request, dueNanos, stream, kind, connection);
        Kind how = connections.fresh() ? Kind.REQUEST_ON_NEW : Kind.REQUEST;
        post.send(how, nowNanos, flights.token(flight), 0);
        limit(giveUps[stream], request, flight, nowNanos);
    }

    /** Notes when a client gives up. Those at the front whose requests are over go, so that the rest stay few. */
    private void limit(Lane lane, long request, int flight, long nowNanos) {
        while (!lane.isEmpty() && !flights.waits((int) lane.where(), lane.what())) {
            lane.drop();
        }
        lane.send(nowNanos, request, flight, 0);
        findNext();
    }

    long nextNanos() {
        return nextNanos;
    }

    private void findNext() {
        long next = Lane.NEVER;
        for (Lane lane : giveUps) {
            next = Math.min(next, lane.nextNanos());
        }
        nextNanos = next;
    }

    /** Lets the clients give up whose time is over. */
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
        findNext();
    }

    /** Giving up closes the connection; the balancer learns of it a hop later. */
    private void giveUp(int flight, long nowNanos) {
        end(flight, Cause.GAVE_UP, 0, nowNanos);
        connections.close(flights.connection[flight]);
        post.send(Kind.CLIENT_GONE, nowNanos, flights.request[flight], flight);
    }

    /** The balancer's answer has come. */
    void result(int flight, long nowNanos) {
        if (!flights.told[flight]) {
            int status = flights.status[flight];
            end(flight, cause(flight, status), status, nowNanos);
            if (flights.closes[flight]) {
                connections.close(flights.connection[flight]);
            } else {
                connections.idle(flights.connection[flight], nowNanos);
            }
        }
        flights.free(flight);
    }

    /** The cause that the balancer gave, or what the status of a backend's answer means. */
    private @Nullable Cause cause(int flight, int status) {
        if (flights.cause[flight] >= 0) {
            return CAUSES[flights.cause[flight]];
        }
        Set<Integer> good = traffic.get(flights.traffic[flight])
                .requests()
                .get(flights.kind[flight])
                .good();
        boolean isGood = good.isEmpty() ? status < FIRST_SERVER_ERROR : good.contains(status);
        return isGood ? null : Cause.BACKEND_ERROR;
    }

    private void end(int flight, @Nullable Cause cause, int status, long nowNanos) {
        flights.told[flight] = true;
        listener.requestEnded(
                nowNanos,
                flights.request[flight],
                flights.dueNanos[flight],
                flights.traffic[flight],
                flights.kind[flight],
                cause,
                status);
    }

    /** The backend that a flight's connection follows, or nobody. */
    int pinned(int flight) {
        return connections.pinned(flights.connection[flight]);
    }

    void pin(int flight, int backend) {
        connections.pin(flights.connection[flight], backend);
    }
}
