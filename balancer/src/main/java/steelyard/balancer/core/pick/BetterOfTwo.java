package steelyard.balancer.core.pick;

/**
 * The better of two distinct members drawn by effective weight; the first drawn when neither is. The second is drawn among
 * those that the first is not, so that a pick always compares where two may be picked.
 */
abstract class BetterOfTwo extends LotsPicker {
    BetterOfTwo(int members, Lots lots) {
        super(members, lots);
    }

    abstract boolean better(int second, int first);

    @Override
    public int pick(long request, int attempt, long key, int[] tried, int triedCount, long nowNanos) {
        int first = draw(request, attempt, tried, triedCount);
        if (first == NOBODY) {
            return NOBODY;
        }
        int second = drawSecond(request, attempt, tried, triedCount, first);
        return second != NOBODY && better(second, first) ? second : first;
    }
}
