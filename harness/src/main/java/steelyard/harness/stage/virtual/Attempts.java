package steelyard.harness.stage.virtual;

import java.util.Arrays;
import java.util.List;
import steelyard.backends.behave.Reply;
import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.settings.PoolSettings;
import steelyard.drills.model.Drill;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.virtual.Post.Kind;

/**
 * The balancer's side towards backends: an attempt from its pick to what became of it, on a kept connection or a new one.
 * What is to follow from that is not known here.
 */
final class Attempts {
    /** What a backend answers that goes over to another protocol (RFC 9110, 15.2.2). */
    static final int SWITCHING = 101;

    private final PlayListener listener;
    private final Post post;
    private final Decider decider;
    private final VirtualClients clients;
    private final Flights flights;
    private final Streams streams;
    private final FirstBytes firstBytes;
    private final int[] poolOf;
    private final boolean[] speaksTls;
    /** Kept connections without work, by backend. */
    private final int[] idle;

    private final Ask ask = new Ask();

    Attempts(
            Drill drill,
            List<PoolSettings> pools,
            PlayListener listener,
            Post post,
            Decider decider,
            VirtualClients clients,
            Flights flights,
            Streams streams) {
        this.listener = listener;
        this.post = post;
        this.decider = decider;
        this.clients = clients;
        this.flights = flights;
        this.streams = streams;
        firstBytes = new FirstBytes(flights, pools, post.hopNanos());
        Cast cast = new Cast(drill);
        poolOf = new int[cast.backends().size()];
        Arrays.setAll(poolOf, cast::poolOf);
        speaksTls = new boolean[poolOf.length];
        for (int backend = 0; backend < poolOf.length; backend++) {
            speaksTls[backend] = pools.get(poolOf[backend]).front().backendTls();
        }
        idle = new int[poolOf.length];
    }

    /** When the next limit on a first byte is over. */
    long nextNanos() {
        return firstBytes.nextNanos();
    }

    /** The flight of an attempt whose first byte did not come in time, or -1 when there is none any more. */
    int late(long nowNanos) {
        for (long token = firstBytes.expired(nowNanos); token >= 0; token = firstBytes.expired(nowNanos)) {
            if (flights.current(token)) {
                return Slots.of(token);
            }
        }
        return -1;
    }

    /** Makes the next attempt at a request, or lets it wait for a backend; false when nobody can be picked for it. */
    boolean begin(int flight, long nowNanos) {
        int stream = flights.traffic[flight];
        ask.clear();
        ask.pool = streams.pool(stream);
        ask.request = flights.request[flight];
        for (int i = 0; i < flights.triedCount[flight]; i++) {
            ask.again(flights.tried[flight][i]);
        }
        if (ask.attempt == 1 && streams.rules(stream).pins()) {
            ask.pinned = clients.pinned(flight);
        }
        if (streams.says(stream)) {
            streams.say(ask, stream, flights.kind[flight], flights.client[flight], flights.held[flight]);
        }
        ask.ticket = flights.token(flight);
        int backend = decider.pick(ask, nowNanos);
        if (backend >= 0) {
            send(flight, ask.attempt, backend, nowNanos);
        } else if (backend == Decider.WAITING) {
            flights.waiting(flight, ask.attempt);
        }
        return backend != Decider.NOBODY;
    }

    /** An attempt that waited has its backend. */
    void placed(int flight, int backend, long nowNanos) {
        send(flight, flights.attempt[flight], backend, nowNanos);
    }

    private void send(int flight, int attempt, int backend, long nowNanos) {
        int stream = flights.traffic[flight];
        if (attempt == 1 && streams.rules(stream).pins()) {
            clients.pin(flight, backend);
        }
        flights.attempted(flight, attempt, backend);
        long token = flights.token(flight);
        if (idle[backend] > 0) {
            idle[backend]--;
            post.send(Kind.ATTEMPT, nowNanos, token, backend);
            firstBytes.sentOnKept(streams.pool(stream), token, nowNanos);
        } else {
            post.send(Kind.CONNECT, nowNanos, token, backend);
        }
    }

    /** The balancer's wish for a connection reaches the backend. */
    void connect(VirtualBackends backends, long token, long nowNanos) {
        if (!flights.current(token)) {
            return;
        }
        int backend = flights.backend[Slots.of(token)];
        if (backends.listening(backend)) {
            post.send(speaksTls[backend] ? Kind.ATTEMPT_ON_TLS : Kind.ATTEMPT_ON_NEW, nowNanos, token, backend);
            firstBytes.acceptedNew(poolOf[backend], token, nowNanos);
        } else {
            post.send(Kind.REFUSAL, nowNanos, token, backend);
        }
    }

    /** The request reaches the backend. */
    void read(VirtualBackends backends, long token, long nowNanos) {
        if (!flights.current(token)) {
            return;
        }
        int flight = Slots.of(token);
        int backend = flights.backend[flight];
        if (backends.killed(backend)) {
            post.send(Kind.RESET, nowNanos, token, backend);
            return;
        }
        long request = flights.request[flight];
        listener.backendReceived(nowNanos, backend, request, flights.attempt[flight]);
        flights.place[flight] = backends.arrive(backend, token, request, flights.attempt[flight], nowNanos);
    }

    /** A backend is done with what it read; see {@link VirtualBackends.Hearer#replied}. */
    void replied(int backend, long token, long request, int attempt, Reply reply, int answer, long atNanos) {
        boolean waitedFor = flights.current(token);
        int status = waitedFor && reply == Reply.ANSWER && opensTunnel(Slots.of(token)) ? SWITCHING : answer;
        boolean inFull = switch (reply) {
            case ANSWER, TURNED_AWAY, FAULT -> true;
            case SILENCE, LOST, DROPPED -> false;
        };
        listener.backendEnded(atNanos, backend, request, attempt, inFull, status);
        if (!waitedFor) {
            return;
        }
        switch (reply) {
            case ANSWER, TURNED_AWAY, FAULT -> post.send(Kind.ANSWER, atNanos, token, status);
            case LOST -> post.send(Kind.RESET, atNanos, token, backend);
            case SILENCE -> flights.silent[Slots.of(token)] = true;
            case DROPPED -> throw new IllegalStateException("request " + request + " was not given up");
        }
    }

    private boolean opensTunnel(int flight) {
        return streams.openNanos(flights.traffic[flight], flights.kind[flight]) > 0;
    }

    /** A backend died: its kept connections and tunnels are gone, and those that it was silent on break too. */
    void connectionsReset(int backend, long atNanos) {
        idle[backend] = 0;
        for (int flight = 0; flight < flights.used(); flight++) {
            if (flights.attemptOn(flight, backend) && flights.silent[flight] || flights.tunnelOn(flight, backend)) {
                post.send(Kind.RESET, atNanos, flights.token(flight), backend);
            }
        }
    }

    /** The answer is there in full; its connection is kept. */
    void answered(int flight, int status, long nowNanos) {
        idle[flights.backend[flight]]++;
        end(flight, Outcome.ANSWERED, status, nowNanos);
    }

    /** The attempt is over for the balancer. */
    void end(int flight, Outcome outcome, int status, long nowNanos) {
        int backend = flights.backend[flight];
        decider.ended(backend, flights.request[flight], flights.attempt[flight], outcome, status, nowNanos);
        flights.ended(flight);
    }

    /** The balancer closes the connection of an attempt; the backend learns of it a hop later. */
    void close(int flight, long nowNanos) {
        if (flights.place[flight] >= 0) {
            long where = (long) flights.backend[flight] << Integer.SIZE | flights.place[flight];
            post.send(Kind.ATTEMPT_GONE, nowNanos, flights.token(flight), where);
        }
    }
}
