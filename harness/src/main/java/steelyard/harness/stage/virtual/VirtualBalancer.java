package steelyard.harness.stage.virtual;

import java.util.List;
import java.util.Map;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Reply;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.drills.model.Drill;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Sample;
import steelyard.harness.stage.Draws;
import steelyard.harness.stage.StageSettings;
import steelyard.harness.stage.virtual.Post.Kind;

/**
 * What the live side does between sockets and the core, done between messages and the core: gives each message to the part
 * that it is for, and has the Decider's orders carried out. It decides nothing.
 */
final class VirtualBalancer implements VirtualBackends.Hearer {
    private final Decider decider;
    private final Ordered ordered = new Ordered();
    private final VirtualClients clients;
    private final VirtualProbes probes;
    private final VirtualReadings readings;
    private final Streams streams;
    private final Flights flights;
    private final Passages passages = new Passages();
    private final PassThrough passThrough;
    private final Attempts attempts;
    private final Exchanges exchanges;

    VirtualBalancer(Drill drill, Chance chance, PlayListener listener, Post post) {
        BalancerSettings settings = StageSettings.balancer(drill);
        List<PoolSettings> pools = settings.pools();
        streams = new Streams(drill, settings);
        flights = new Flights(mostAttempts(pools));
        clients = new VirtualClients(listener, post, flights, passages, streams, drill, idleLimitNanos(pools));
        probes = new VirtualProbes(settings, post);
        readings = new VirtualReadings(settings, post);
        decider = new Decider(settings, Draws.of(chance), new ToListener(listener), ordered, 0);
        passThrough = new PassThrough(listener, post, decider, flights, passages, streams);
        attempts = new Attempts(drill, pools, listener, post, decider, clients, flights, streams);
        exchanges = new Exchanges(post, decider, flights, streams, attempts, passThrough);
    }

    private static int mostAttempts(List<PoolSettings> pools) {
        int most = 1;
        for (PoolSettings pool : pools) {
            if (pool.retry() != null) {
                most = Math.max(most, 1 + pool.retry().atMost());
            }
        }
        return most;
    }

    /** Clients close what was idle for half of the balancer's own limit. */
    private static long idleLimitNanos(List<PoolSettings> pools) {
        return pools.stream()
                .mapToLong(each -> each.timeouts().idleNanos() / 2)
                .min()
                .orElseThrow();
    }

    // --- time -------------------------------------------------------------------------------------------------------

    /** Whether any request, or connection that is passed through, is still open. */
    boolean busy() {
        return flights.open() > 0 || passages.open() > 0;
    }

    /** Nothing more is sent: once the last request is over, clients close the connections that count as work. */
    void finish(long nowNanos) {
        if (flights.open() == 0 && passages.open() > 0) {
            clients.closeIdle(nowNanos);
        }
    }

    /** When a client, a limit on a first byte or the Decider has something to do. */
    long nextNanos() {
        long deciding = decider.hasDeadline() ? decider.nextDeadlineNanos() : Lane.NEVER;
        return Math.min(deciding, Math.min(clients.nextNanos(), attempts.nextNanos()));
    }

    /** Does all of that which is due. */
    void poll(long nowNanos) {
        clients.poll(nowNanos);
        for (int flight = attempts.late(nowNanos); flight >= 0; flight = attempts.late(nowNanos)) {
            exchanges.late(flight, nowNanos);
        }
        decider.poll(nowNanos);
        carryOut(nowNanos);
    }

    /** Carries out what the Decider has ordered; to be called after everything that may have told it something. */
    void carryOut(long nowNanos) {
        if (ordered.count() > 0) {
            carryOutAll(nowNanos);
        }
    }

    private void carryOutAll(long nowNanos) {
        for (int i = 0; i < ordered.count(); i++) {
            int backend = ordered.backend(i);
            long number = ordered.number(i);
            switch (ordered.kind(i)) {
                case PROBE -> probes.start(backend, number, nowNanos);
                case READING -> readings.start(backend, number, nowNanos);
                case PLACE -> exchanges.placed(number, backend, nowNanos);
                case CUT -> exchanges.cutAll(backend, nowNanos);
            }
        }
        ordered.clear();
    }

    /** Interrupted: everybody gives up, and the balancer knows at once. */
    void abandonAll(long nowNanos) {
        exchanges.abandonAll(nowNanos);
    }

    // --- messages ---------------------------------------------------------------------------------------------------

    /** Delivers the message at the head of a lane. */
    void deliver(Lane lane, VirtualBackends backends, long nowNanos) {
        Kind kind = Post.kind(lane);
        long what = lane.what();
        long where = lane.where();
        lane.drop();
        switch (kind) {
            case REQUEST, REQUEST_ON_NEW, REQUEST_ON_TLS -> exchanges.arrived(what, nowNanos);
            case CLIENT_GONE -> exchanges.gone((int) where, nowNanos);
            case CONNECT -> attempts.connect(backends, what, nowNanos);
            case ATTEMPT, ATTEMPT_ON_NEW, ATTEMPT_ON_TLS -> attempts.read(backends, what, nowNanos);
            case ATTEMPT_GONE -> backends.abandon((int) (where >>> Integer.SIZE), (int) where, what, nowNanos);
            case ANSWER -> exchanges.answered(what, (int) where, nowNanos);
            case RESET -> exchanges.reset(what, nowNanos);
            case REFUSAL -> exchanges.refused(what, nowNanos);
            case RESULT -> clients.result(Slots.of(what), nowNanos);
            case TUNNEL_OPENED -> clients.opened(what, nowNanos);
            case TUNNEL_ENDED -> exchanges.tunnelEnded(what, nowNanos);
            case PASSAGE, PASSAGE_ON_TLS -> passThrough.came(what, nowNanos);
            case PASSAGE_CONNECT -> passThrough.connect(backends, what, nowNanos);
            case PASSAGE_OPEN, PASSAGE_OPEN_ON_TLS -> passThrough.opened(what, nowNanos);
            case PASSAGE_REFUSED -> passThrough.refused(what, nowNanos);
            case PASSED -> passThrough.read(backends, what, nowNanos);
            case PASSAGE_LEFT -> passThrough.left(what, nowNanos);
            case PASSAGE_ENDED -> passThrough.ended(what, nowNanos);
            case PASSAGE_RESET -> passThrough.reset(what, nowNanos);
            case PASSAGE_BROKEN -> clients.broken(what, nowNanos);
            case PROBE_CONNECT -> probes.connect(backends, (int) where, what, nowNanos);
            case PROBE, PROBE_ON_TLS -> probes.read(backends, (int) where, what, nowNanos);
            case READING_CONNECT -> readings.connect(backends, (int) where, what, nowNanos);
            case READING, READING_ON_TLS -> readings.read(backends, (int) where, what, nowNanos);
            case READING_RESULT -> readings.result(decider, (int) (where >> 1), what, (where & 1) == 1, nowNanos);
            case PROBE_RESULT -> decider.probeAnswered((int) (where >> 1), what, (where & 1) == 1, nowNanos);
        }
        carryOut(nowNanos);
    }

    @Override
    public void replied(int backend, long token, long request, int attempt, Reply reply, int status, long atNanos) {
        attempts.replied(backend, token, request, attempt, reply, status, atNanos);
    }

    @Override
    public void probeReplied(int backend, long probe, Reply reply, int status, long atNanos) {
        probes.replied(backend, probe, reply, status, atNanos);
    }

    @Override
    public void readingReplied(int backend, long reading, Reply reply, Map<String, Double> gauges, long atNanos) {
        readings.replied(backend, reading, reply, gauges, atNanos);
    }

    @Override
    public void connectionsReset(int backend, long atNanos) {
        attempts.connectionsReset(backend, atNanos);
        passThrough.connectionsReset(backend, atNanos);
    }

    // --- for hands --------------------------------------------------------------------------------------------------

    VirtualClients clients() {
        return clients;
    }

    /** Fills in what the balancer thinks of a backend. */
    void read(int backend, Sample sample, long nowNanos) {
        sample.inFlight[backend] = decider.inFlight(backend);
        sample.standing[backend] = decider.standing(backend);
        sample.pickable[backend] = decider.pickable(backend);
        sample.setWeight[backend] = decider.weight(backend);
        sample.effectiveWeight[backend] = decider.effectiveWeight(backend, nowNanos);
        sample.entitledShare[backend] = decider.entitledShare(backend, nowNanos);
        sample.headroom[backend] = decider.headroom(backend) / 1e3;
    }

    /** How many requests of a pool wait for a backend to be free. */
    int waiting(int pool) {
        return decider.waiting(pool);
    }

    Decider decider() {
        return decider;
    }
}
