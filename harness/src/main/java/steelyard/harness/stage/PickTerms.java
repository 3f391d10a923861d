package steelyard.harness.stage;

import steelyard.balancer.settings.DelaySettings;
import steelyard.balancer.settings.HashSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.drills.model.Delay;
import steelyard.drills.model.Hashing;
import steelyard.drills.model.Picking;
import steelyard.drills.model.Pool;

/** How a pool of a drill picks, in the words of the balancer. */
final class PickTerms {
    private PickTerms() {}

    static PickSettings of(Picking picking) {
        Hashing hash = picking.hash();
        Delay delay = picking.delay();
        return new PickSettings(
                method(picking.method()),
                count(picking.count()),
                weights(picking.weights()),
                hash == null ? HashSettings.USUAL : hash(hash),
                delay == null
                        ? DelaySettings.USUAL
                        : new DelaySettings(delay.candidates() == Delay.Candidates.ALL, delay.memoryNanos()));
    }

    static PoolSettings.Method method(Pool.Method method) {
        return switch (method) {
            case ROUND_ROBIN -> PoolSettings.Method.ROUND_ROBIN;
            case WEIGHTED_ROUND_ROBIN -> PoolSettings.Method.WEIGHTED_ROUND_ROBIN;
            case STRIDE -> PoolSettings.Method.STRIDE;
            case RANDOM -> PoolSettings.Method.RANDOM;
            case WEIGHTED_RANDOM -> PoolSettings.Method.WEIGHTED_RANDOM;
            case LEAST_CONNECTIONS -> PoolSettings.Method.LEAST_CONNECTIONS;
            case TWO_CHOICES -> PoolSettings.Method.TWO_CHOICES;
            case JOIN_IDLE_QUEUE -> PoolSettings.Method.JOIN_IDLE_QUEUE;
            case EXPECTED_DELAY -> PoolSettings.Method.EXPECTED_DELAY;
            case HASH -> PoolSettings.Method.HASH;
        };
    }

    private static PoolSettings.Count count(Pool.Count count) {
        return switch (count) {
            case REQUESTS -> PoolSettings.Count.REQUESTS;
            case CONNECTIONS -> PoolSettings.Count.CONNECTIONS;
        };
    }

    private static PoolSettings.Weights weights(Pool.Weights weights) {
        return switch (weights) {
            case BACKEND -> PoolSettings.Weights.BACKEND;
            case HOST -> PoolSettings.Weights.HOST;
            case LOAD -> PoolSettings.Weights.LOAD;
        };
    }

    private static HashSettings hash(Hashing hash) {
        HashSettings.By by = switch (hash.by()) {
            case CLIENT -> HashSettings.By.CLIENT;
            case PATH -> HashSettings.By.PATH;
            case HEADER -> HashSettings.By.HEADER;
            case COOKIE -> HashSettings.By.COOKIE;
        };
        HashSettings.Table table = switch (hash.table()) {
            case RING -> HashSettings.Table.RING;
            case RENDEZVOUS -> HashSettings.Table.RENDEZVOUS;
            case PERMUTATION -> HashSettings.Table.PERMUTATION;
        };
        String name = hash.name();
        return new HashSettings(by, name == null ? "" : name, table, hash.points(), hash.size(), hash.bound());
    }
}
