package steelyard.balancer.core.decide;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.pick.Picker;
import steelyard.balancer.core.standing.BackendStanding;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;

/**
 * Decides everything that one balancer instance decides, for all its pools: who is picked, who may be, who waits, what is
 * probed, read, benched, cut and tried again.
 *
 * <p>It is told what happens and when, and answers with a decision; what has to be done it says through {@link Orders},
 * what it decided through {@link DecisionSink}, both inside the call and in the order of decision. It reads no clock,
 * draws by key and starts nothing by itself: a driver sets a timer for {@link #nextDeadlineNanos} and calls {@link #poll}
 * then. One Decider serves all pools because the turns of a host span pools.
 *
 * <p>Pools, hosts and backends are known by their numbers in {@link BalancerSettings}. Instants come from any clock that
 * does not go back, from any origin. Not thread-safe: a driver with several threads holds one lock over every call.
 * Cost: log2 of the backends a call, a walk over the pool where tiers or the last resort change for all; a pick and its end
 * allocate nothing.
 */
public final class Decider {
    /** No backend. */
    public static final int NOBODY = Picker.NOBODY;

    /** No backend yet: every one is full, and the try waits. */
    public static final int WAITING = NOBODY - 1;

    private final Roster roster;
    private final Attempts attempts;
    private final Probing probing;
    private final Readings readings;

    /**
     * @param nowNanos the instant from which the first probes' phases count
     * @throws IllegalArgumentException for settings that contradict themselves
     */
    public Decider(BalancerSettings settings, Chance chance, DecisionSink sink, Orders orders, long nowNanos) {
        roster = new Roster(settings, chance, sink, orders, nowNanos);
        attempts = new Attempts(roster);
        probing = new Probing(roster);
        readings = new Readings(roster);
    }

    // --- time -------------------------------------------------------------------------------------------------------

    /** Whether {@link #poll} will ever have something to do, as things stand. */
    public boolean hasDeadline() {
        return roster.deadlines.next() != NOBODY;
    }

    /** When {@link #poll} has something to do next; any other call may move it. Only while {@link #hasDeadline}. */
    public long nextDeadlineNanos() {
        return roster.deadlines.nextNanos();
    }

    /**
     * Does everything that is due: starts and drops probes and readings, cuts at drain limits, ends ramps and bench times,
     * sends away what waited too long.
     */
    public void poll(long nowNanos) {
        while (hasDeadline() && nowNanos - nextDeadlineNanos() >= 0) {
            int place = roster.deadlines.next();
            if (place < roster.backends()) {
                pollBackend(place, nowNanos);
                settle(place, nowNanos);
            } else {
                attempts.serve(place - roster.backends(), nowNanos);
            }
        }
    }

    private void pollBackend(int backend, long nowNanos) {
        BackendStanding standing = roster.standing(backend);
        if (standing.cuts(nowNanos)) {
            roster.orders.cut(backend);
        }
        roster.stood(backend, standing.pollBench(nowNanos), nowNanos);
        roster.stood(backend, standing.pollRamp(nowNanos), nowNanos);
        probing.poll(backend, nowNanos);
        readings.poll(backend, nowNanos);
    }

    // --- work -------------------------------------------------------------------------------------------------------

    /**
     * Picks a backend for one attempt and counts it in flight there. A backend that the client's connection or affinity
     * follows is kept, at no turn, while it may be picked, is not full and was not tried yet.
     *
     * @return the backend, {@link #NOBODY}, or {@link #WAITING}: {@link Orders#place} tells then
     */
    public int pick(Ask ask, long nowNanos) {
        return attempts.pick(ask, nowNanos);
    }

    /**
     * A try that waits is no longer wanted.
     *
     * @return whether it was still waiting; otherwise its {@link Orders#place} has been given and what it was given has to
     *     be ended
     */
    public boolean leave(long ticket, long nowNanos) {
        return attempts.leave(ticket, nowNanos);
    }

    /** How many tries of a pool wait for a place. */
    public int waiting(int pool) {
        return roster.desks[pool].line.waiting();
    }

    /**
     * An attempt ended; to be told exactly once for each pick. What it says may bench the backend; the place that it leaves
     * may go to a try that waits.
     *
     * @param status of the answer, or 0 without one
     * @throws IllegalStateException if nothing was in flight there
     */
    public void ended(int backend, long request, int attempt, Outcome outcome, int status, long nowNanos) {
        attempts.ended(backend, request, attempt, outcome, status, nowNanos);
        attempts.serve(roster.poolOf(backend), nowNanos);
    }

    /**
     * Whether an attempt that has ended may be made again on another backend; takes from the pool's budget when it says
     * yes. A retry that {@link #pick} then finds nobody for, at once or after waiting, gives back what it took.
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
        RetryRule rule = roster.desks[pool].retries;
        boolean granted = rule.grants(attempt, outcome, status, idempotent, headSent, replayable);
        if (rule.asked()) {
            roster.sink.retryAsked(nowNanos, pool, request, attempt, granted);
        }
        return granted;
    }

    /** Whether the next answer from this backend should tell its client to close the connection. */
    public boolean saysClose(int backend) {
        return roster.standing(backend).saysClose();
    }

    // --- probes and readings ----------------------------------------------------------------------------------------

    /** The answer to a probe, or its failure; one to a probe that is over is ignored. */
    public void probeAnswered(int backend, long probe, boolean good, long nowNanos) {
        probing.answered(backend, probe, good, nowNanos);
        attempts.serve(roster.poolOf(backend), nowNanos);
    }

    /**
     * What a backend's load page said; a reading that is over is ignored.
     *
     * @param gauges in the order of the pool's load settings, from 0 to 1, NaN for one that the page lacks (such a reading
     *     does not count); null for a reading that failed
     */
    public void read(int backend, long number, double @Nullable [] gauges, long nowNanos) {
        readings.read(backend, number, gauges, nowNanos);
    }

    // --- by hand ----------------------------------------------------------------------------------------------------

    /** Changes the probe settings of a pool; runs so far and probes under way go on. Harmless for a pool without probes. */
    public void retune(int pool, ProbeSettings settings, long nowNanos) {
        probing.retune(pool, settings, nowNanos);
    }

    /** Changes what drains of a pool keep to; the limit of one under way stays. */
    public void retune(int pool, DrainSettings settings, long nowNanos) {
        roster.desks[pool].retune(settings);
    }

    /**
     * Changes the method of a pool: from the next pick on, knowing all that is in flight.
     *
     * @throws IllegalArgumentException for one that the pool's other settings rule out; nothing changes then
     */
    public void retune(int pool, PoolSettings.Method method, long nowNanos) {
        roster.desks[pool].retune(method, nowNanos);
        attempts.serve(pool, nowNanos);
    }

    /**
     * Begins a drain: nothing new is picked for the backend, what is in flight has until the limit and is then cut.
     *
     * @param limitNanos 0 for the pool's own limit
     */
    public void drain(int backend, long limitNanos, long nowNanos) {
        long limit = limitNanos == 0 ? roster.deskOf(backend).drain().limitNanos() : limitNanos;
        roster.stood(backend, roster.standing(backend).drain(limit, nowNanos), nowNanos);
        settle(backend, nowNanos);
    }

    /** Admits a backend that was draining or withdrawn. */
    public void admit(int backend, long nowNanos) {
        roster.stood(backend, roster.standing(backend).admit(nowNanos), nowNanos);
        settle(backend, nowNanos);
    }

    /** Takes a backend out; what it has in flight goes on. */
    public void withdraw(int backend, long nowNanos) {
        roster.stood(backend, roster.standing(backend).withdraw(nowNanos), nowNanos);
        settle(backend, nowNanos);
    }

    /**
     * Sets a backend's weight.
     *
     * @param weight from 0 to {@link BackendSettings#MOST_WEIGHT}
     * @throws IllegalArgumentException for another one; nothing changes then
     */
    public void reweigh(int backend, int weight, long nowNanos) {
        requireWeight(weight);
        roster.deskOf(backend).reweigh(roster.member(backend), weight, nowNanos);
        roster.sink.reweighed(nowNanos, false, backend, weight);
        attempts.serve(roster.poolOf(backend), nowNanos);
    }

    /** Sets a host's weight; see {@link #reweigh}. */
    public void reweighHost(int host, int weight, long nowNanos) {
        requireWeight(weight);
        roster.hostWeights[host] = weight;
        roster.firstPlaces.weigh(host, weight);
        roster.againPlaces.weigh(host, weight);
        for (PoolDesk desk : roster.desks) {
            desk.weights.stale();
        }
        roster.sink.reweighed(nowNanos, true, host, weight);
        for (int pool = 0; pool < roster.desks.length; pool++) {
            attempts.serve(pool, nowNanos);
        }
    }

    // --- reading ----------------------------------------------------------------------------------------------------

    /** Attempts picked for a backend that have not ended. */
    public int inFlight(int backend) {
        return roster.deskOf(backend).inFlight(roster.member(backend));
    }

    public Standing standing(int backend) {
        return roster.standing(backend).shown();
    }

    /**
     * Whether new work may be given to a backend, by its standing, its tier and the last resort. A full one counts: it is
     * given work as soon as a place frees.
     */
    public boolean pickable(int backend) {
        return roster.deskOf(backend).open(roster.member(backend));
    }

    /** The weight that was set. */
    public int weight(int backend) {
        return roster.deskOf(backend).weight(roster.member(backend));
    }

    /** The weight that was set. */
    public int hostWeight(int host) {
        return roster.hostWeights[host];
    }

    /** What load readings leave of a backend's weight, in thousandths; 1000 while nothing fresh is known. */
    public int headroom(int backend) {
        return roster.deskOf(backend).headroomMilli(roster.member(backend));
    }

    /** What a backend weighs now, ramp, host and headroom included, whether or not it may be picked. */
    public double effectiveWeight(int backend, long nowNanos) {
        return roster.deskOf(backend).weights.effectiveWeight(roster.member(backend), nowNanos);
    }

    /** Effective weight over the sum of those of the pool that may be picked; 0 for one that may not. */
    public double entitledShare(int backend, long nowNanos) {
        return roster.deskOf(backend).weights.entitledShare(roster.member(backend), nowNanos);
    }

    // --- inside -----------------------------------------------------------------------------------------------------

    private static void requireWeight(int weight) {
        if (weight < 0 || weight > BackendSettings.MOST_WEIGHT) {
            throw new IllegalArgumentException(
                    "a weight is from 0 to " + BackendSettings.MOST_WEIGHT + ", not " + weight);
        }
    }

    /** What a change of a backend's standing leads to: another next instant, and places for those that wait. */
    private void settle(int backend, long nowNanos) {
        roster.reschedule(backend, nowNanos);
        attempts.serve(roster.poolOf(backend), nowNanos);
    }
}
