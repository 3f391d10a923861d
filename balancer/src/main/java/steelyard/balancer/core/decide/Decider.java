package steelyard.balancer.core.decide;

import java.util.Arrays;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.pick.HostPlaces;
import steelyard.balancer.core.pick.Picker;
import steelyard.balancer.core.pick.Tournament;
import steelyard.balancer.core.standing.BackendStanding;
import steelyard.balancer.core.standing.ProbeTracker;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;

/**
 * Decides everything that one balancer instance decides, for all its pools: who is picked, who may be, what is probed,
 * cut and tried again.
 *
 * <p>It is told what happens and when, and answers with a decision; what has to be done it says through {@link Orders},
 * what it decided through {@link DecisionSink}, both inside the call and in the order of decision. It reads no clock,
 * draws by key and starts nothing by itself: a driver sets a timer for {@link #nextDeadlineNanos} and calls {@link #poll}
 * then. One Decider serves all pools because the turns of a host span pools.
 *
 * <p>Pools, hosts and backends are known by their numbers in {@link BalancerSettings}. Instants come from any clock that
 * does not go back, from any origin. Not thread-safe: a driver with several threads holds one lock over every call.
 * Cost: log2 of the backends a call; a pick and its end allocate nothing.
 */
public final class Decider {
    /** No backend. */
    public static final int NOBODY = Picker.NOBODY;

    /** No backend yet: every one is full, and the try waits. */
    public static final int WAITING = NOBODY - 1;

    private final DecisionSink sink;
    private final Orders orders;
    private final PoolDesk[] pools;
    private final int[] poolOf;
    private final int[] firstOfPool;
    private final BackendStanding[] standings;
    private final int[] inFlight;
    private final int[][] setWeights;
    private final int[] hostWeights;
    private final HostPlaces firstPlaces;
    private final HostPlaces againPlaces;
    /** As of the last change of each, so that finding the next costs no walk over standings. */
    private final long[] deadlineNanos;

    private final Tournament deadlines;

    /**
     * @param nowNanos the instant from which the first probes' phases count
     * @throws IllegalArgumentException for settings that contradict themselves
     */
    public Decider(BalancerSettings settings, Chance chance, DecisionSink sink, Orders orders, long nowNanos) {
        this.sink = sink;
        this.orders = orders;
        List<BackendSettings> backends = settings.backends();
        inFlight = new int[backends.size()];
        poolOf = new int[backends.size()];
        standings = new BackendStanding[backends.size()];
        hostWeights = settings.hosts().stream().mapToInt(HostSettings::weight).toArray();
        firstPlaces = new HostPlaces(hostWeights);
        againPlaces = new HostPlaces(hostWeights);
        pools = new PoolDesk[settings.pools().size()];
        firstOfPool = new int[pools.length];
        setWeights = new int[pools.length][];
        deadlineNanos = new long[standings.length];
        deadlines = new Tournament(backends.size(), this::earlier);
        int backend = 0;
        for (int pool = 0; pool < pools.length; pool++) {
            firstOfPool[pool] = backend;
            backend = open(pool, settings.pools().get(pool), backend, chance, nowNanos);
        }
        for (int each = 0; each < standings.length; each++) {
            reschedule(each);
        }
    }

    private int open(int pool, PoolSettings settings, int first, Chance chance, long nowNanos) {
        List<BackendSettings> members = settings.backends();
        int next = first + members.size();
        Arrays.fill(poolOf, first, next, pool);
        for (int member = 0; member < members.size(); member++) {
            boolean startsUp = !members.get(member).startsDown();
            ProbeTracker probes = probes(settings.probe(), first + member, startsUp, chance, nowNanos);
            standings[first + member] = new BackendStanding(first + member, probes, startsUp, settings.warmUp());
        }
        setWeights[pool] = members.stream().mapToInt(BackendSettings::weight).toArray();
        pools[pool] = new PoolDesk(
                settings,
                Arrays.copyOfRange(standings, first, next),
                setWeights[pool],
                members.stream().mapToInt(BackendSettings::host).toArray(),
                hostWeights,
                firstPlaces,
                againPlaces,
                chance);
        return next;
    }

    private static @Nullable ProbeTracker probes(
            @Nullable ProbeSettings settings, int backend, boolean startsUp, Chance chance, long nowNanos) {
        if (settings == null) {
            return null;
        }
        long phaseNanos = (long) (chance.unit(Chance.Draw.PROBE_PHASE, backend, 0) * settings.everyNanos());
        return new ProbeTracker(settings, startsUp, nowNanos + phaseNanos);
    }

    // --- time -------------------------------------------------------------------------------------------------------

    /** Whether {@link #poll} will ever have something to do, as things stand. */
    public boolean hasDeadline() {
        return deadlines.best() != NOBODY;
    }

    /** When {@link #poll} has something to do next; any other call may move it. Only while {@link #hasDeadline}. */
    public long nextDeadlineNanos() {
        return deadlineNanos[deadlines.best()];
    }

    /** Does everything that is due: starts and drops probes, cuts at drain limits, ends ramps. */
    public void poll(long nowNanos) {
        int backend = deadlines.best();
        while (backend != NOBODY && nowNanos - deadlineNanos[backend] >= 0) {
            pollBackend(backend, nowNanos);
            reschedule(backend);
            backend = deadlines.best();
        }
    }

    private void pollBackend(int backend, long nowNanos) {
        BackendStanding standing = standings[backend];
        if (standing.cuts(nowNanos)) {
            orders.cut(backend);
        }
        boolean wasWarming = standings[backend].warming();
        stood(backend, standing.pollRamp(nowNanos), wasWarming, nowNanos);
        pollProbe(backend, nowNanos);
    }

    private void pollProbe(int backend, long nowNanos) {
        BackendStanding standing = standings[backend];
        Standing before = standing.shown();
        boolean wasWarming = standings[backend].warming();
        ProbeTracker.Step step = standing.pollProbes(nowNanos);
        ProbeTracker probes = standing.probes();
        if (probes == null) {
            return;
        }
        switch (step) {
            case NOTHING -> {}
            case START -> orders.startProbe(backend, probes.number());
            case DROP -> {
                orders.dropProbe(backend, probes.number());
                sink.probed(nowNanos, backend, probes.number(), false);
                stood(backend, standing.afterProbe(before, nowNanos), wasWarming, nowNanos);
            }
        }
    }

    // --- work -------------------------------------------------------------------------------------------------------

    /**
     * Picks a backend for one attempt and counts it in flight there. A backend that the client's connection or affinity
     * follows is kept, at no turn, while it may be picked and was not tried yet.
     *
     * @return the backend, {@link #NOBODY}, or {@link #WAITING}: {@link Orders#place} tells then
     */
    public int pick(Ask ask, long nowNanos) {
        PoolDesk pool = pools[ask.pool];
        int backend = ask.pinned;
        if (!keeps(ask)) {
            backend = toBackend(ask.pool, ask.attempt == 1 ? pool.pickFirst(ask, nowNanos) : pickAgain(ask, nowNanos));
        }
        if (ask.attempt == 1) {
            pool.retries.firstTry();
        }
        if (backend == NOBODY) {
            sink.nobody(nowNanos, ask.pool, ask.request, ask.attempt);
            return NOBODY;
        }
        int count = ++inFlight[backend];
        pool.began(member(backend), count, nowNanos);
        sink.picked(nowNanos, ask.pool, backend, ask.request, ask.attempt, count);
        return backend;
    }

    private boolean keeps(Ask ask) {
        return ask.pinned != NOBODY && pickable(ask.pinned) && !ask.tried(ask.pinned);
    }

    private int pickAgain(Ask ask, long nowNanos) {
        // The pool knows its backends by their place in it; the asker's array gets its numbers back below.
        int first = firstOfPool[ask.pool];
        int[] tried = ask.tried();
        int count = ask.triedCount();
        for (int i = 0; i < count; i++) {
            tried[i] -= first;
        }
        int member = pools[ask.pool].pickAgain(ask, tried, count, nowNanos);
        for (int i = 0; i < count; i++) {
            tried[i] += first;
        }
        return member;
    }

    /**
     * A try that waits is no longer wanted.
     *
     * @return whether it was still waiting; otherwise its {@link Orders#place} has been given and what it was given has to
     *     be ended
     */
    public boolean leave(long ticket, long nowNanos) {
        return false;
    }

    private int toBackend(int pool, int member) {
        return member == NOBODY ? NOBODY : firstOfPool[pool] + member;
    }

    /**
     * An attempt ended; to be told exactly once for each pick.
     *
     * @param status of the answer, or 0 without one
     * @throws IllegalStateException if nothing was in flight there
     */
    public void ended(int backend, long request, int attempt, Outcome outcome, int status, long nowNanos) {
        if (inFlight[backend] == 0) {
            throw new IllegalStateException("request " + request + " ended on backend " + backend + ", which has none");
        }
        int count = --inFlight[backend];
        pools[poolOf[backend]].ended(member(backend), count, outcome == Outcome.ANSWERED, nowNanos);
        sink.ended(nowNanos, backend, request, attempt, outcome, status, count);
    }

    /**
     * Whether an attempt that has ended may be made again on another backend; takes from the pool's budget when it says
     * yes.
     *
     * @param attempt the one that ended
     * @param idempotent whether the method is (RFC 9110, 9.2.2)
     * @param headSent whether any octet of the request was written to the backend
     * @param replayable whether the whole request can be sent again
     */
    public boolean retry(
            int pool,
            long request,
            int attempt,
            Outcome outcome,
            int status,
            boolean idempotent,
            boolean headSent,
            boolean replayable,
            long nowNanos) {
        RetryRule rule = pools[pool].retries;
        boolean granted = rule.grants(attempt, outcome, status, idempotent, headSent, replayable);
        if (rule.asked()) {
            sink.retryAsked(nowNanos, pool, request, attempt, granted);
        }
        return granted;
    }

    /** Whether the next answer from this backend should tell its client to close the connection. */
    public boolean saysClose(int backend) {
        return standings[backend].saysClose();
    }

    // --- probes -----------------------------------------------------------------------------------------------------

    /** The answer to a probe, or its failure; one to a probe that is over is ignored. */
    public void probeAnswered(int backend, long probe, boolean good, long nowNanos) {
        BackendStanding standing = standings[backend];
        ProbeTracker probes = standing.probes();
        if (probes == null) {
            return;
        }
        Standing before = standing.shown();
        boolean wasWarming = standings[backend].warming();
        boolean passes = good && probes.passesAt(nowNanos);
        if (probes.answered(probe, good, nowNanos)) {
            sink.probed(nowNanos, backend, probe, passes);
            stood(backend, standing.afterProbe(before, nowNanos), wasWarming, nowNanos);
            reschedule(backend);
        }
    }

    /** Changes the probe settings of a pool; runs so far and probes under way go on. Harmless for a pool without probes. */
    public void retune(int pool, ProbeSettings settings, long nowNanos) {
        int first = firstOfPool[pool];
        for (int backend = first; backend < first + setWeights[pool].length; backend++) {
            standings[backend].retune(settings, nowNanos);
            reschedule(backend);
        }
    }

    // --- by hand ----------------------------------------------------------------------------------------------------

    /**
     * Begins a drain: nothing new is picked for the backend, what is in flight has until the limit and is then cut.
     *
     * @param limitNanos 0 for the pool's own limit
     */
    public void drain(int backend, long limitNanos, long nowNanos) {
        long limit = limitNanos == 0 ? pools[poolOf[backend]].settings.drain().limitNanos() : limitNanos;
        boolean wasWarming = standings[backend].warming();
        stood(backend, standings[backend].drain(limit, nowNanos), wasWarming, nowNanos);
        reschedule(backend);
    }

    /** Admits a backend that was draining or withdrawn. */
    public void admit(int backend, long nowNanos) {
        boolean wasWarming = standings[backend].warming();
        stood(backend, standings[backend].admit(nowNanos), wasWarming, nowNanos);
        reschedule(backend);
    }

    /** Takes a backend out; what it has in flight goes on. */
    public void withdraw(int backend, long nowNanos) {
        boolean wasWarming = standings[backend].warming();
        stood(backend, standings[backend].withdraw(nowNanos), wasWarming, nowNanos);
        reschedule(backend);
    }

    /**
     * Sets a backend's weight.
     *
     * @param weight from 0 to {@link BackendSettings#MOST_WEIGHT}
     * @throws IllegalArgumentException for another one; nothing changes then
     */
    public void reweigh(int backend, int weight, long nowNanos) {
        requireWeight(weight);
        pools[poolOf[backend]].reweigh(member(backend), weight, nowNanos);
        sink.reweighed(nowNanos, false, backend, weight);
    }

    /** Sets a host's weight; see {@link #reweigh}. */
    public void reweighHost(int host, int weight, long nowNanos) {
        requireWeight(weight);
        hostWeights[host] = weight;
        firstPlaces.weigh(host, weight);
        againPlaces.weigh(host, weight);
        for (PoolDesk pool : pools) {
            pool.weights.stale();
        }
        sink.reweighed(nowNanos, true, host, weight);
    }

    // --- reading ----------------------------------------------------------------------------------------------------

    /** Attempts picked for a backend that have not ended. */
    public int inFlight(int backend) {
        return inFlight[backend];
    }

    public Standing standing(int backend) {
        return standings[backend].shown();
    }

    /** Whether new work may be given to a backend. */
    public boolean pickable(int backend) {
        return standings[backend].shown().pickable();
    }

    /** The weight that was set. */
    public int weight(int backend) {
        return setWeights[poolOf[backend]][member(backend)];
    }

    /** The weight that was set. */
    public int hostWeight(int host) {
        return hostWeights[host];
    }

    /** What a backend weighs now, ramp and host included, whether or not it may be picked. */
    public double effectiveWeight(int backend, long nowNanos) {
        return pools[poolOf[backend]].weights.effectiveWeight(member(backend), nowNanos);
    }

    /** Effective weight over the sum of those of the pool that may be picked; 0 for one that may not. */
    public double entitledShare(int backend, long nowNanos) {
        return pools[poolOf[backend]].weights.entitledShare(member(backend), nowNanos);
    }

    // --- inside -----------------------------------------------------------------------------------------------------

    private static void requireWeight(int weight) {
        if (weight < 0 || weight > BackendSettings.MOST_WEIGHT) {
            throw new IllegalArgumentException(
                    "a weight is from 0 to " + BackendSettings.MOST_WEIGHT + ", not " + weight);
        }
    }

    private int member(int backend) {
        return backend - firstOfPool[poolOf[backend]];
    }

    private void stood(int backend, @Nullable Transition change, boolean wasWarming, long nowNanos) {
        if (change == null) {
            return;
        }
        pools[poolOf[backend]].stood(member(backend), change.from().pickable(), wasWarming, nowNanos);
        sink.stood(change);
    }

    private void reschedule(int backend) {
        if (standings[backend].hasDeadline()) {
            deadlineNanos[backend] = standings[backend].deadlineNanos();
            deadlines.enter(backend);
        } else {
            deadlines.leave(backend);
        }
    }

    private boolean earlier(int backend, int other) {
        return deadlineNanos[backend] - deadlineNanos[other] < 0;
    }
}
