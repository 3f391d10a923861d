package steelyard.balancer.core.decide;

import steelyard.balancer.core.pick.HostPlaces;
import steelyard.balancer.core.pick.HostTurns;
import steelyard.balancer.core.pick.LeastConnections;
import steelyard.balancer.core.pick.Picker;
import steelyard.balancer.core.pick.Ramp;
import steelyard.balancer.core.pick.RoundRobin;
import steelyard.balancer.core.pick.Stride;
import steelyard.balancer.core.pick.WeightedRoundRobin;
import steelyard.balancer.core.standing.BackendStanding;
import steelyard.balancer.core.weigh.PoolWeights;
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

    private static final int[] NONE_TRIED = {};

    final PoolSettings settings;
    final PoolWeights weights;
    final RetryRule retries;
    private final BackendStanding[] standings;
    private final int[] set;
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
            HostPlaces againPlaces) {
        this.settings = settings;
        this.standings = standings;
        this.set = set;
        weights = new PoolWeights(settings, standings, set, hostOf, hostSet);
        retries = new RetryRule(settings.retry());
        WarmUpSettings warmUp = settings.warmUp();
        rampStepNanos = warmUp == null ? 0 : Math.max(1, warmUp.rampNanos() / RAMP_STEPS);
        first = picker(firstPlaces, hostOf);
        again = picker(againPlaces, hostOf);
        for (int member = 0; member < set.length; member++) {
            tellWeight(member, (long) set[member] * Picker.MILLI);
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
            case RANDOM, WEIGHTED_RANDOM, TWO_CHOICES, JOIN_IDLE_QUEUE, EXPECTED_DELAY, HASH ->
                throw new IllegalArgumentException("no picker for " + settings.method());
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
        long full = (long) set[member] * Picker.MILLI;
        if (first.takesTurns() || full == 0) {
            tellWeight(member, full);
        } else {
            double ramped = (double) full * standings[member].rampFraction(nowNanos) / Ramp.FULL;
            tellWeight(member, Math.max(1, Math.round(ramped)));
        }
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
