package steelyard.balancer.settings;

/**
 * How a pool picks.
 *
 * @param hash of the method HASH; another method leaves it unread
 * @param delay of the method EXPECTED_DELAY; another method leaves it unread
 */
public record PickSettings(
        PoolSettings.Method method,
        PoolSettings.Count count,
        PoolSettings.Weights weights,
        HashSettings hash,
        DelaySettings delay) {

    /** By requests and the backends' own weights. */
    public static PickSettings of(PoolSettings.Method method) {
        return new PickSettings(
                method,
                PoolSettings.Count.REQUESTS,
                PoolSettings.Weights.BACKEND,
                HashSettings.USUAL,
                DelaySettings.USUAL);
    }

    public PickSettings with(PoolSettings.Method changed) {
        return new PickSettings(changed, count, weights, hash, delay);
    }

    public PickSettings with(PoolSettings.Count changed) {
        return new PickSettings(method, changed, weights, hash, delay);
    }

    public PickSettings with(PoolSettings.Weights changed) {
        return new PickSettings(method, count, changed, hash, delay);
    }

    public PickSettings with(HashSettings changed) {
        return new PickSettings(method, count, weights, changed, delay);
    }

    public PickSettings with(DelaySettings changed) {
        return new PickSettings(method, count, weights, hash, changed);
    }
}
