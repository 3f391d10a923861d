package steelyard.balancer.core.pick;

/**
 * Of two distinct members drawn by effective weight, the one with fewer in flight over weight; the first drawn when they are
 * equal (Mitzenmacher, IEEE TPDS 12(10) 2001).
 *
 * <p>Two looks do most of what looking at everybody does, and, unlike it, they do no harm when counts are old: not everybody
 * runs to the same member (Mitzenmacher, IEEE TPDS 11(1) 2000).
 */
public final class TwoChoices extends BetterOfTwo {
    public TwoChoices(int members, Lots lots) {
        super(members, lots);
    }

    @Override
    boolean better(int second, int first) {
        return inFlight[second] * weight[first] < inFlight[first] * weight[second];
    }
}
