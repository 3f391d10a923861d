package steelyard.balancer.core.decide;

import java.util.List;
import steelyard.balancer.core.pick.ExpectedDelayOfAll;
import steelyard.balancer.core.pick.ExpectedDelayOfTwo;
import steelyard.balancer.core.pick.Hash;
import steelyard.balancer.core.pick.HostPlaces;
import steelyard.balancer.core.pick.HostTurns;
import steelyard.balancer.core.pick.JoinIdleQueue;
import steelyard.balancer.core.pick.LeastConnections;
import steelyard.balancer.core.pick.Lots;
import steelyard.balancer.core.pick.Picker;
import steelyard.balancer.core.pick.Ramp;
import steelyard.balancer.core.pick.Random;
import steelyard.balancer.core.pick.RoundRobin;
import steelyard.balancer.core.pick.Stride;
import steelyard.balancer.core.pick.TwoChoices;
import steelyard.balancer.core.pick.WeightedRandom;
import steelyard.balancer.core.pick.WeightedRoundRobin;
import steelyard.balancer.core.standing.BackendStanding;
import steelyard.balancer.core.weigh.PoolWeights;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.DelaySettings;
import steelyard.balancer.settings.HashSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.WarmUpSettings;

/**
 * Everything that picks for one pool: a picker for first tries, one of its own for retries, weights, retry rule.
 *
 * <p>Members are known by their place in the pool.
 */
final class PoolDesk {
    /** The ramp of a method that does not take turns is told in steps of a thousandth of its length. */
    private static final int RAMP_STEPS = 1000;

    /** Room for the lots of one attempt among the numbers of draws. */
    private static final int LOTS = 64;

    private static final int[] NONE_TRIED = {};

    final PoolSettings settings;
    final PoolWeights weights;
    final RetryRule retries;
    private final BackendStanding[] standings;
    private final int[] set;
    private final Lots lots;
    private final Picker first;
    private final Picker again;
    private final long rampStepNanos;
    private int warming;
    private long nextRampStepNanos;

    PoolDesk(
            PoolSettings settings,
            BackendStanding[] standings,
            int[] set,
            int[] hostOf,
            int[] hostSet,
            HostPlaces firstPlaces,
            HostPlaces againPlaces,
            Chance chance) {
        this.settings = settings;
        this.standings = standings;
        this.set = set;
        weights = new PoolWeights(settings, standings, set, hostOf, hostSet);
        retries = new RetryRule(settings.retry());
        WarmUpSettings warmUp = settings.warmUp();
        rampStepNanos = warmUp == null ? 0 : Math.max(1, warmUp.rampNanos() / RAMP_STEPS);
        lots = (request, attempt, draw) -> chance.bits(Chance.Draw.PICK, request, (long) LOTS * attempt + draw);
        first = picker(firstPlaces, hostOf);
        again = picker(againPlaces, hostOf);
        for (int member = 0; member < set.length; member++) {
            tellWeight(member, fullWeight(member));
            if (standings[member].shown().pickable()) {
                first.enter(member);
                again.enter(member);
            }
        }
    }

    private Picker picker(HostPlaces places, int[] hostOf) {
        int members = set.length;
        Ramp ramp = (member, nowNanos) -> standings[member].rampFraction(nowNanos);
        if (settings.weights() == PoolSettings.Weights.HOST) {
            return new HostTurns(places, hostOf, ramp);
        }
        return switch (settings.method()) {
            case ROUND_ROBIN -> new RoundRobin(members, ramp);
            case WEIGHTED_ROUND_ROBIN -> new WeightedRoundRobin(members, ramp);
            case STRIDE -> new Stride(members);
            case LEAST_CONNECTIONS -> new LeastConnections(members);
            case RANDOM -> new Random(members, lots);
            case WEIGHTED_RANDOM -> new WeightedRandom(members, lots);
            case TWO_CHOICES -> new TwoChoices(members, lots);
            case JOIN_IDLE_QUEUE -> new JoinIdleQueue(members, lots);
            case EXPECTED_DELAY -> expectedDelay(settings.pick().delay());
            case HASH -> hash(settings.pick().hash(), ramp);
        };
    }

    private Picker expectedDelay(DelaySettings delay) {
        return delay.all()
                ? new ExpectedDelayOfAll(set.length, delay.memoryNanos())
                : new ExpectedDelayOfTwo(set.length, lots, delay.memoryNanos());
    }

    private Picker hash(HashSettings hash, Ramp ramp) {
        List<String> names =
                settings.backends().stream().map(BackendSettings::name).toList();
        return switch (hash.table()) {
            case RING -> Hash.overRing(names, hash.points(), hash.bound(), ramp);
            case RENDEZVOUS -> Hash.byRendezvous(names, hash.bound(), ramp);
            case PERMUTATION -> Hash.overPermutation(names, hash.size(), hash.bound(), ramp);
        };
    }

    int pickFirst(Ask ask, long nowNanos) {
        stepRamps(nowNanos);
        return first.pick(ask.request, ask.attempt, ask.key, NONE_TRIED, 0, nowNanos);
    }

    /** @param tried members already tried, in the first {@code triedCount} entries */
    int pickAgain(Ask ask, int[] tried, int triedCount, long nowNanos) {
        stepRamps(nowNanos);
        return again.pick(ask.request, ask.attempt, ask.key, tried, triedCount, nowNanos);
    }

    void began(int member, int count, long nowNanos) {
        first.began(member, count, nowNanos);
        again.began(member, count, nowNanos);
    }

    void ended(int member, int count, boolean answered, long nowNanos) {
        first.ended(member, count, answered, nowNanos);
        again.ended(member, count, answered, nowNanos);
    }

    void reweigh(int member, int weight, long nowNanos) {
        set[member] = weight;
        weights.stale();
        weigh(member, nowNanos);
    }

    /** Takes over what changed in a member's standing. */
    void stood(int member, boolean wasPickable, boolean wasWarming, long nowNanos) {
        weights.stale();
        boolean isWarming = standings[member].warming();
        boolean isPickable = standings[member].shown().pickable();
        warming += (isWarming ? 1 : 0) - (wasWarming ? 1 : 0);
        if (isWarming != wasWarming) {
            weigh(member, nowNanos);
            nextRampStepNanos = nowNanos + rampStepNanos;
        }
        if (isPickable && !wasPickable) {
            first.enter(member);
            again.enter(member);
        } else if (!isPickable && wasPickable) {
            first.leave(member);
            again.leave(member);
        }
    }

    /** Tells the pickers a member's weight: ramped, unless they hold warming members back by turns. */
    private void weigh(int member, long nowNanos) {
        long full = fullWeight(member);
        if (first.takesTurns() || full == 0) {
            tellWeight(member, full);
        } else {
            double ramped = (double) full * standings[member].rampFraction(nowNanos) / Ramp.FULL;
            tellWeight(member, Math.max(1, Math.round(ramped)));
        }
    }

    private long fullWeight(int member) {
        return (first.weighs() ? set[member] : 1) * (long) Picker.MILLI;
    }

    private void tellWeight(int member, long weightMilli) {
        first.weigh(member, weightMilli);
        again.weigh(member, weightMilli);
    }

    private void stepRamps(long nowNanos) {
        if (warming == 0 || first.takesTurns() || nowNanos - nextRampStepNanos < 0) {
            return;
        }
        nextRampStepNanos = nowNanos + rampStepNanos;
        for (int member = 0; member < set.length; member++) {
            if (standings[member].warming()) {
                weigh(member, nowNanos);
            }
        }
    }
}
