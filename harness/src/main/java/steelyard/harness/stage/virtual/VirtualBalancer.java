package steelyard.harness.stage.virtual;

import java.util.Arrays;
import java.util.List;
import java.util.Set;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Reply;
import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Orders;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Traffic;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Sample;
import steelyard.harness.stage.Draws;
import steelyard.harness.stage.StageSettings;
import steelyard.harness.stage.virtual.Flights.State;
import steelyard.harness.stage.virtual.Post.Kind;

/**
 * What the live side does between sockets and the core, done between messages and the core: carries requests from clients
 * to the backend that the Decider picks, and what became of them back. It decides nothing.
 */
final class VirtualBalancer implements VirtualBackends.Hearer, Orders {
    /** RFC 9110, 9.2.2. */
    private static final Set<String> IDEMPOTENT = Set.of("GET", "HEAD", "OPTIONS", "TRACE", "PUT", "DELETE");

    private static final int BAD_GATEWAY = 502;
    private static final int UNAVAILABLE = 503;
    private static final int GATEWAY_TIMEOUT = 504;

    private final PlayListener listener;
    private final Post post;
    private final Decider decider;
    private final VirtualClients clients;
    private final VirtualProbes probes;
    private final FirstBytes firstBytes;
    private final Flights flights;
    private final int[] poolOfTraffic;
    private final int[] poolOf;
    private final boolean[][] idempotent;
    private final PoolRules[] rules;
    /** Kept connections without work, by backend. */
    private final int[] idle;

    private final Ordered ordered = new Ordered();
    private final Ask ask = new Ask();

    VirtualBalancer(Drill drill, Chance chance, PlayListener listener, Post post) {
        this.listener = listener;
        this.post = post;
        Cast cast = new Cast(drill);
        BalancerSettings settings = StageSettings.balancer(drill);
        List<PoolSettings> pools = settings.pools();
        rules = pools.stream().map(PoolRules::of).toArray(PoolRules[]::new);
        List<Traffic> traffic = drill.traffic();
        poolOf = new int[cast.backends().size()];
        Arrays.setAll(poolOf, cast::poolOf);
        idle = new int[poolOf.length];
        poolOfTraffic =
                traffic.stream().mapToInt(each -> cast.poolNumber(each.pool())).toArray();
        flights = new Flights(mostAttempts(pools));
        firstBytes = new FirstBytes(flights, pools, post.hopNanos());
        idempotent = traffic.stream().map(VirtualBalancer::idempotent).toArray(boolean[][]::new);
        clients = new VirtualClients(listener, post, flights, drill, idleLimitNanos(pools));
        probes = new VirtualProbes(settings, post);
        decider = new Decider(settings, Draws.of(chance), new ToListener(listener), this, 0);
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

    private static boolean[] idempotent(Traffic traffic) {
        boolean[] each = new boolean[traffic.requests().size()];
        for (int kind = 0; kind < each.length; kind++) {
            each[kind] = IDEMPOTENT.contains(traffic.requests().get(kind).method());
        }
        return each;
    }

    /** Clients close what was idle for half of the balancer's own limit. */
    private static long idleLimitNanos(List<PoolSettings> pools) {
        return pools.stream()
                .mapToLong(each -> each.timeouts().idleNanos() / 2)
                .min()
                .orElseThrow();
    }

    // --- time -------------------------------------------------------------------------------------------------------

    /** Whether any request is still open. */
    boolean busy() {
        return flights.open() > 0;
    }

    /** When a client, a limit on a first byte or the Decider has something to do. */
    long nextNanos() {
        long deciding = decider.hasDeadline() ? decider.nextDeadlineNanos() : Lane.NEVER;
        return Math.min(deciding, Math.min(clients.nextNanos(), firstBytes.nextNanos()));
    }

    /** Does all of that which is due. */
    void poll(long nowNanos) {
        clients.poll(nowNanos);
        for (long token = firstBytes.expired(nowNanos); token >= 0; token = firstBytes.expired(nowNanos)) {
            if (flights.current(token)) {
                late(Flights.flightOf(token), nowNanos);
            }
        }
        decider.poll(nowNanos);
        carryOut(nowNanos);
    }

    private void late(int flight, long nowNanos) {
        closeAttempt(flight, nowNanos);
        failed(flight, Outcome.LATE, GATEWAY_TIMEOUT, Cause.GATEWAY_TIMEOUT, true, nowNanos);
    }

    /** Delivers the message at the head of a lane. */
    void deliver(Lane lane, VirtualBackends backends, long nowNanos) {
        Kind kind = Post.kind(lane);
        long what = lane.what();
        long where = lane.where();
        lane.drop();
        switch (kind) {
            case REQUEST, REQUEST_ON_NEW -> arrived(what, nowNanos);
            case CLIENT_GONE -> clientGone((int) where, nowNanos);
            case CONNECT -> connect(backends, what, nowNanos);
            case ATTEMPT, ATTEMPT_ON_NEW -> read(backends, what, nowNanos);
            case ATTEMPT_GONE -> backends.abandon((int) (where >>> Integer.SIZE), (int) where, what, nowNanos);
            case ANSWER -> answered(what, (int) where, nowNanos);
            case RESET -> reset(what, nowNanos);
            case REFUSAL -> refused(what, nowNanos);
            case RESULT -> clients.result(Flights.flightOf(what), nowNanos);
            case PROBE_CONNECT -> probes.connect(backends, (int) where, what, nowNanos);
            case PROBE -> probes.read(backends, (int) where, what, nowNanos);
            case PROBE_RESULT -> decider.probeAnswered((int) (where >> 1), what, (where & 1) == 1, nowNanos);
        }
    }

    // --- clients ----------------------------------------------------------------------------------------------------

    void send(long request, long dueNanos, int stream, int kind, int client, long nowNanos) {
        clients.send(request, dueNanos, stream, kind, client, nowNanos);
    }

    private void arrived(long token, long nowNanos) {
        int flight = Flights.flightOf(token);
        if (!flights.current(token) || flights.told[flight]) {
            // Its client gave up meanwhile, and the balancer may know it already.
            return;
        }
        if (!attempt(flight, nowNanos)) {
            reply(flight, UNAVAILABLE, Cause.NO_BACKEND, nowNanos);
        }
    }

    /** The client closed its connection: an attempt under way is given up, an answer on its way finds nobody. */
    private void clientGone(int flight, long nowNanos) {
        switch (flights.state[flight]) {
            case TO_BALANCER -> flights.free(flight);
            case ATTEMPTED -> {
                closeAttempt(flight, nowNanos);
                end(flight, Outcome.ABANDONED, 0, nowNanos);
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
                end(flight, Outcome.ABANDONED, 0, nowNanos);
                flights.free(flight);
            }
        }
    }

    // --- attempts ---------------------------------------------------------------------------------------------------

    /** Makes the next attempt at a request; false when nobody can be picked for it. */
    private boolean attempt(int flight, long nowNanos) {
        int pool = poolOfTraffic[flights.traffic[flight]];
        int attempt = flights.attempt[flight] + 1;
        boolean first = attempt == 1;
        boolean pins = first && rules[pool].pins();
        ask.clear();
        ask.pool = pool;
        ask.request = flights.request[flight];
        for (int i = 0; i < flights.triedCount[flight]; i++) {
            ask.again(flights.tried[flight][i]);
        }
        ask.pinned = pins ? clients.pinned(flight) : Decider.NOBODY;
        int backend = decider.pick(ask, nowNanos);
        if (backend == Decider.NOBODY) {
            return false;
        }
        if (pins) {
            clients.pin(flight, backend);
        }
        flights.attempted(flight, attempt, backend);
        long token = flights.token(flight);
        if (idle[backend] > 0) {
            idle[backend]--;
            post.send(Kind.ATTEMPT, nowNanos, token, backend);
            firstBytes.sentOnKept(pool, token, nowNanos);
        } else {
            post.send(Kind.CONNECT, nowNanos, token, backend);
        }
        return true;
    }

    private void connect(VirtualBackends backends, long token, long nowNanos) {
        if (!flights.current(token)) {
            return;
        }
        int backend = flights.backend[Flights.flightOf(token)];
        if (backends.listening(backend)) {
            post.send(Kind.ATTEMPT_ON_NEW, nowNanos, token, backend);
            firstBytes.acceptedNew(poolOf[backend], token, nowNanos);
        } else {
            post.send(Kind.REFUSAL, nowNanos, token, backend);
        }
    }

    private void read(VirtualBackends backends, long token, long nowNanos) {
        if (!flights.current(token)) {
            return;
        }
        int flight = Flights.flightOf(token);
        int backend = flights.backend[flight];
        if (backends.killed(backend)) {
            post.send(Kind.RESET, nowNanos, token, backend);
            return;
        }
        long request = flights.request[flight];
        listener.backendReceived(nowNanos, backend, request, flights.attempt[flight]);
        flights.place[flight] = backends.arrive(backend, token, request, flights.attempt[flight], nowNanos);
    }

    @Override
    public void replied(int backend, long token, long request, int attempt, Reply reply, int status, long atNanos) {
        boolean waitedFor = flights.current(token);
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
            case SILENCE -> flights.silent[Flights.flightOf(token)] = true;
            case DROPPED -> throw new IllegalStateException("request " + request + " was not given up");
        }
    }

    @Override
    public void probeReplied(int backend, long probe, Reply reply, int status, long atNanos) {
        probes.replied(backend, probe, reply, status, atNanos);
    }

    /** A backend died: its kept connections are gone, and those that it was silent on break too. */
    @Override
    public void connectionsReset(int backend, long atNanos) {
        idle[backend] = 0;
        for (int flight = 0; flight < flights.used(); flight++) {
            if (flights.attemptOn(flight, backend) && flights.silent[flight]) {
                post.send(Kind.RESET, atNanos, flights.token(flight), backend);
            }
        }
    }

    private void answered(long token, int status, long nowNanos) {
        if (!flights.current(token)) {
            return;
        }
        int flight = Flights.flightOf(token);
        int backend = flights.backend[flight];
        idle[backend]++;
        end(flight, Outcome.ANSWERED, status, nowNanos);
        if (!retriesAnswer(flight, status, nowNanos)) {
            flights.closes[flight] = decider.saysClose(backend);
            flights.replied(flight, status, -1);
            post.send(Kind.RESULT, nowNanos, flights.token(flight), 0);
        }
    }

    private boolean retriesAnswer(int flight, int status, long nowNanos) {
        PoolRules pool = rules[poolOfTraffic[flights.traffic[flight]]];
        return pool.asksAbout(flights.attempt[flight], status)
                && retries(flight, Outcome.ANSWERED, status, true, nowNanos);
    }

    private void reset(long token, long nowNanos) {
        if (flights.current(token)) {
            failed(Flights.flightOf(token), Outcome.RESET, BAD_GATEWAY, Cause.RESET, true, nowNanos);
        }
    }

    private void refused(long token, long nowNanos) {
        if (flights.current(token)) {
            failed(Flights.flightOf(token), Outcome.REFUSED, BAD_GATEWAY, Cause.REFUSED, false, nowNanos);
        }
    }

    /** An attempt failed: another one is made, or the client told. */
    private void failed(int flight, Outcome outcome, int status, Cause cause, boolean headSent, long nowNanos) {
        end(flight, outcome, 0, nowNanos);
        boolean asks = rules[poolOfTraffic[flights.traffic[flight]]].retries();
        if (!asks || !retries(flight, outcome, 0, headSent, nowNanos)) {
            reply(flight, status, cause, nowNanos);
        }
    }

    private boolean retries(int flight, Outcome outcome, int status, boolean headSent, long nowNanos) {
        int stream = flights.traffic[flight];
        boolean granted = decider.retry(
                poolOfTraffic[stream],
                flights.request[flight],
                flights.attempt[flight],
                outcome,
                status,
                idempotent[stream][flights.kind[flight]],
                headSent,
                true,
                nowNanos);
        return granted && attempt(flight, nowNanos);
    }

    private void end(int flight, Outcome outcome, int status, long nowNanos) {
        int backend = flights.backend[flight];
        decider.ended(backend, flights.request[flight], flights.attempt[flight], outcome, status, nowNanos);
        flights.ended(flight);
    }

    /** The balancer closes the connection of an attempt; the backend learns of it a hop later. */
    private void closeAttempt(int flight, long nowNanos) {
        if (flights.place[flight] >= 0) {
            long where = (long) flights.backend[flight] << Integer.SIZE | flights.place[flight];
            post.send(Kind.ATTEMPT_GONE, nowNanos, flights.token(flight), where);
        }
    }

    private void reply(int flight, int status, Cause cause, long nowNanos) {
        flights.replied(flight, status, cause.ordinal());
        post.send(Kind.RESULT, nowNanos, flights.token(flight), 0);
    }

    // --- orders and hands -------------------------------------------------------------------------------------------

    @Override
    public void startProbe(int backend, long probe) {
        ordered.probe(backend, probe);
    }

    @Override
    public void dropProbe(int backend, long probe) {
        // What it brings is ignored by its number.
    }

    @Override
    public void startReading(int backend, long number) {
        throw new IllegalStateException("no pool here reads load");
    }

    @Override
    public void dropReading(int backend, long number) {
        throw new IllegalStateException("no pool here reads load");
    }

    @Override
    public void place(long ticket, int backend) {
        throw new IllegalStateException("nobody waits here");
    }

    @Override
    public void cut(int backend) {
        ordered.cut(backend);
    }

    private void carryOut(long nowNanos) {
        for (int i = 0; i < ordered.probes(); i++) {
            probes.start(ordered.probeBackend(i), ordered.probeNumber(i), nowNanos);
        }
        for (int i = 0; i < ordered.cuts(); i++) {
            cutAll(ordered.cutBackend(i), nowNanos);
        }
        ordered.clear();
    }

    private void cutAll(int backend, long nowNanos) {
        for (int flight = 0; flight < flights.used(); flight++) {
            if (flights.attemptOn(flight, backend)) {
                closeAttempt(flight, nowNanos);
                failed(flight, Outcome.CUT, UNAVAILABLE, Cause.CUT, true, nowNanos);
            }
        }
    }

    void drain(int backend, long limitNanos, long nowNanos) {
        decider.drain(backend, limitNanos, nowNanos);
    }

    void admit(int backend, long nowNanos) {
        decider.admit(backend, nowNanos);
    }

    void withdraw(int backend, long nowNanos) {
        decider.withdraw(backend, nowNanos);
    }

    void reweigh(int backend, int weight, long nowNanos) {
        decider.reweigh(backend, weight, nowNanos);
    }

    void reweighHost(int host, int weight, long nowNanos) {
        decider.reweighHost(host, weight, nowNanos);
    }

    /** Fills in what the balancer thinks of a backend. */
    void read(int backend, Sample sample, long nowNanos) {
        sample.inFlight[backend] = decider.inFlight(backend);
        sample.standing[backend] = decider.standing(backend);
        sample.setWeight[backend] = decider.weight(backend);
        sample.effectiveWeight[backend] = decider.effectiveWeight(backend, nowNanos);
        sample.entitledShare[backend] = decider.entitledShare(backend, nowNanos);
    }
}
