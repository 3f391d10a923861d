package steelyard.balancer.core.pick;

/** Each pick by lot, by effective weight, whatever was picked before. {@link Urn} says what a draw costs. */
public final class WeightedRandom extends LotsPicker {
    public WeightedRandom(int members, Lots lots) {
        super(members, lots);
    }

    @Override
    public int pick(long request, int attempt, long key, int[] tried, int triedCount, long nowNanos) {
        return draw(request, attempt, tried, triedCount);
    }
}
