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
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.DelaySettings;
import steelyard.balancer.settings.HashSettings;
import steelyard.balancer.settings.PoolSettings;

/**
 * Makes the pickers of one pool by the name of the method.
 *
 * @param hostOf the host of each member
 * @param ramp what part of its turns a member takes, for methods that take turns
 * @param lots for methods that draw
 */
record Methods(int[] hostOf, Ramp ramp, Lots lots) {
    /** Room for the lots of one attempt among the numbers of draws. */
    private static final int LOTS = 64;

    static Methods of(int[] hostOf, Ramp ramp, Chance chance) {
        return new Methods(
                hostOf,
                ramp,
                (request, attempt, draw) -> chance.bits(Chance.Draw.PICK, request, (long) LOTS * attempt + draw));
    }

    /** @param places of the hosts, where the pool counts weights by host */
    Picker picker(PoolSettings pool, HostPlaces places) {
        int members = hostOf.length;
        if (pool.weights() == PoolSettings.Weights.HOST) {
            return new HostTurns(places, hostOf, ramp);
        }
        return switch (pool.method()) {
            case ROUND_ROBIN -> new RoundRobin(members, ramp);
            case WEIGHTED_ROUND_ROBIN -> new WeightedRoundRobin(members, ramp);
            case STRIDE -> new Stride(members);
            case LEAST_CONNECTIONS -> new LeastConnections(members);
            case RANDOM -> new Random(members, lots);
            case WEIGHTED_RANDOM -> new WeightedRandom(members, lots);
            case TWO_CHOICES -> new TwoChoices(members, lots);
            case JOIN_IDLE_QUEUE -> new JoinIdleQueue(members, lots);
            case EXPECTED_DELAY -> expectedDelay(pool.pick().delay());
            case HASH -> hash(pool);
        };
    }

    private Picker expectedDelay(DelaySettings delay) {
        return delay.all()
                ? new ExpectedDelayOfAll(hostOf.length, delay.memoryNanos())
                : new ExpectedDelayOfTwo(hostOf.length, lots, delay.memoryNanos());
    }

    private Picker hash(PoolSettings pool) {
        HashSettings hash = pool.pick().hash();
        List<String> names = pool.backends().stream().map(BackendSettings::name).toList();
        return switch (hash.table()) {
            case RING -> Hash.overRing(names, hash.points(), hash.bound(), ramp);
            case RENDEZVOUS -> Hash.byRendezvous(names, hash.bound(), ramp);
            case PERMUTATION -> Hash.overPermutation(names, hash.size(), hash.bound(), ramp);
        };
    }
}
