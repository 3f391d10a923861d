package steelyard.balancer.core.decide;

import java.util.Arrays;
import java.util.function.BooleanSupplier;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.pick.HostPlaces;
import steelyard.balancer.core.pick.Picker;
import steelyard.balancer.core.pick.Ramp;
import steelyard.balancer.core.standing.BackendStanding;
import steelyard.balancer.core.standing.Eligibility;
import steelyard.balancer.core.weigh.Headroom;
import steelyard.balancer.core.weigh.PoolWeights;
import steelyard.balancer.settings.AffinitySettings;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.InFlightSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.WarmUpSettings;

/**
 * Everything that picks for one pool: a picker for first tries, one of its own for retries, who may be picked, weights, what
 * is in flight, retry rule, waiting line and the clients that are held.
 *
 * <p>Members are known by their place in the pool.
 */
final class PoolDesk {
    private static final int[] NONE_TRIED = {};

    final PoolWeights weights;
    final RetryRule retries;
    final WaitingLine line;
    final @Nullable AffinitySettings affinity;
    /** There where clients are held by their address. */
    final @Nullable ClientTable clients;
    /** Whether one more may be benched. */
    final BooleanSupplier benchRoom;

    private final Eligibility eligibility;
    private final BackendStanding[] standings;
    private final int[] set;
    private final int[] headroomMilli;
    private final int[] inFlight;
    /** Who may be picked, and who of them is full, as the pickers were told. */
    private final boolean[] entered;

    private final boolean[] blocked;

    private final RampSteps ramps;
    private final Methods methods;
    private final HostPlaces firstPlaces;
    private final HostPlaces againPlaces;
    private final int mostInFlight;
    private PoolSettings settings;
    private Picker first;
    private Picker again;

    PoolDesk(
            PoolSettings settings,
            BackendStanding[] standings,
            int[] set,
            int[] hostOf,
            int[] hostSet,
            HostPlaces firstPlaces,
            HostPlaces againPlaces,
            Chance chance,
            long nowNanos) {
        int members = set.length;
        this.settings = settings;
        this.standings = standings;
        this.set = set;
        methods = Methods.of(hostOf, this::turnFraction, chance);
        this.firstPlaces = firstPlaces;
        this.againPlaces = againPlaces;
        headroomMilli = new int[members];
        Arrays.fill(headroomMilli, Headroom.FULL);
        inFlight = new int[members];
        entered = new boolean[members];
        blocked = new boolean[members];
        eligibility = new Eligibility(standings, settings.backends(), settings.reserve());
        weights = new PoolWeights(settings, standings, eligibility, set, headroomMilli, hostOf, hostSet);
        retries = new RetryRule(settings.retry());
        InFlightSettings limit = settings.inFlight();
        mostInFlight = limit == null ? Integer.MAX_VALUE : limit.most();
        line = limit == null ? new WaitingLine(0, 1) : new WaitingLine(limit.waiting(), limit.waitNanos());
        affinity = settings.affinity();
        clients = affinity != null && affinity.by() == AffinitySettings.By.CLIENT
                ? new ClientTable(affinity.lastsNanos(), ClientTable.MOST)
                : null;
        benchRoom = new BenchCap(standings, settings.bench());
        WarmUpSettings warmUp = settings.warmUp();
        ramps = new RampSteps(members, warmUp == null ? 0 : warmUp.rampNanos());
        first = methods.picker(settings, firstPlaces);
        again = methods.picker(settings, againPlaces);
        weights.weighs(first.weighs());
        for (int member = 0; member < members; member++) {
            weigh(member, nowNanos);
            settle(member);
        }
    }

    // --- picking ----------------------------------------------------------------------------------------------------

    int pickFirst(Ask ask, long nowNanos) {
        stepRamps(nowNanos);
        return first.pick(ask.request, ask.attempt, ask.key, NONE_TRIED, 0, nowNanos);
    }

    /** @param tried members already tried, in the first {@code triedCount} entries */
    int pickAgain(Ask ask, int[] tried, int triedCount, long nowNanos) {
        stepRamps(nowNanos);
        return again.pick(ask.request, ask.attempt, ask.key, tried, triedCount, nowNanos);
    }

    /** Whether new work may be given to a member, once it has a free place. */
    boolean open(int member) {
        return eligibility.open(member);
    }

    boolean full(int member) {
        return inFlight[member] >= mostInFlight;
    }

    /** How many backends the pool has. */
    int members() {
        return set.length;
    }

    int inFlight(int member) {
        return inFlight[member];
    }

    /** An attempt begins; how many are now in flight on the member. */
    int began(int member, long nowNanos) {
        int count = ++inFlight[member];
        first.began(member, count, nowNanos);
        again.began(member, count, nowNanos);
        settle(member);
        return count;
    }

    /** An attempt ended; how many are still in flight on the member. */
    int ended(int member, boolean answered, long nowNanos) {
        int count = --inFlight[member];
        first.ended(member, count, answered, nowNanos);
        again.ended(member, count, answered, nowNanos);
        settle(member);
        return count;
    }

    // --- changes ----------------------------------------------------------------------------------------------------

    int weight(int member) {
        return set[member];
    }

    int headroomMilli(int member) {
        return headroomMilli[member];
    }

    DrainSettings drain() {
        return settings.drain();
    }

    void reweigh(int member, int weight, long nowNanos) {
        set[member] = weight;
        weights.stale();
        weigh(member, nowNanos);
    }

    void headroom(int member, int milli, long nowNanos) {
        headroomMilli[member] = milli;
        weights.stale();
        weigh(member, nowNanos);
    }

    /** Takes over what changed in a member's standing. */
    void stood(int member, long nowNanos) {
        weights.stale();
        if (ramps.note(member, standings[member].warming(), nowNanos)) {
            weigh(member, nowNanos);
        }
        if (eligibility.changed(member)) {
            for (int each = 0; each < set.length; each++) {
                settle(each);
            }
        } else {
            settle(member);
        }
    }

    /** Drains that begin from now on keep to these. */
    void retune(DrainSettings drain) {
        settings = settings.with(drain);
    }

    /**
     * Picks by another method from now on. Its pickers are told all that holds at present: weights, who may be picked, what
     * is in flight; turns begin anew, and nothing that was picked before is touched.
     *
     * @throws IllegalArgumentException for one that the pool's other settings rule out; nothing changes then
     */
    void retune(PoolSettings.Method method, long nowNanos) {
        if (method == settings.method()) {
            return;
        }
        settings = settings.with(settings.pick().with(method));
        first = methods.picker(settings, firstPlaces);
        again = methods.picker(settings, againPlaces);
        weights.weighs(first.weighs());
        for (int member = 0; member < set.length; member++) {
            weigh(member, nowNanos);
            tell(first, member);
            tell(again, member);
            if (inFlight[member] > 0) {
                first.began(member, inFlight[member], nowNanos);
                again.began(member, inFlight[member], nowNanos);
            }
        }
    }

    // --- inside -----------------------------------------------------------------------------------------------------

    /** Brings the pickers to whether a member may be picked and has a free place. */
    private void settle(int member) {
        boolean open = eligibility.open(member);
        boolean blocks = open && full(member);
        if (open == entered[member] && blocks == blocked[member]) {
            return;
        }
        entered[member] = open;
        blocked[member] = blocks;
        tell(first, member);
        tell(again, member);
    }

    private void tell(Picker picker, int member) {
        if (!entered[member]) {
            picker.leave(member);
            return;
        }
        picker.enter(member);
        if (blocked[member]) {
            picker.block(member);
        }
    }

    /** The part of its turns that a member takes: ramp and headroom, in billionths. */
    private long turnFraction(int member, long nowNanos) {
        return standings[member].rampFraction(nowNanos) * headroomMilli[member] / Headroom.FULL;
    }

    /** Tells the pickers a member's weight: with ramp and headroom, unless they hold members back by turns. */
    private void weigh(int member, long nowNanos) {
        long full = (first.weighs() ? set[member] : 1) * (long) Picker.MILLI;
        if (first.takesTurns() || full == 0) {
            tellWeight(member, full);
        } else {
            double held = (double) full * turnFraction(member, nowNanos) / Ramp.FULL;
            tellWeight(member, Math.max(1, Math.round(held)));
        }
    }

    private void tellWeight(int member, long weightMilli) {
        first.weigh(member, weightMilli);
        again.weigh(member, weightMilli);
    }

    private void stepRamps(long nowNanos) {
        if (first.takesTurns() || !ramps.take(nowNanos)) {
            return;
        }
        for (int member = 0; member < set.length; member++) {
            if (ramps.warming(member)) {
                weigh(member, nowNanos);
            }
        }
    }
}
