package steelyard.balancer.core.pick;

/** Each pick by lot, everybody with the same chance but for members that warm up. Set weights play no part. */
public final class Random extends LotsPicker {
    public Random(int members, Lots lots) {
        super(members, lots);
    }

    @Override
    public int pick(long request, int attempt, long key, int[] tried, int triedCount, long nowNanos) {
        return draw(request, attempt, tried, triedCount);
    }

    @Override
    public boolean weighs() {
        return false;
    }
}
