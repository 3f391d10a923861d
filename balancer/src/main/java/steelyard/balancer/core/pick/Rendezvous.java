package steelyard.balancer.core.pick;

/**
 * Every member draws a lot for each key, and the key belongs to the best one (Thaler, Ravishankar, IEEE/ACM ToN 6(1) 1998).
 *
 * <p>The lot is the time after which a clock of a rate as high as the member's weight first rings, -ln(v) / weight with v
 * uniform by key and name: of several such clocks, one rings first with a chance as high as its share of the weights. With
 * equal weights that is the highest hash. A member that leaves or weighs less loses keys to where they would have gone without
 * it, and no other key moves.
 *
 * <p>A walk looks at every member at each step, O(n). Logarithms are taken of few: -ln(1 - v) is at least v, so that whose v /
 * weight is no better than the best so far needs none.
 */
final class Rendezvous implements KeyTable {
    private final long[] nameHash;
    private final boolean[] in;
    private final double[] weight;

    private long key;
    private double lastScore;
    private int lastMember;

    Rendezvous(long[] nameHash) {
        this.nameHash = nameHash;
        in = new boolean[nameHash.length];
        weight = new double[nameHash.length];
    }

    @Override
    public void enter(int member) {
        in[member] = true;
    }

    @Override
    public void leave(int member) {
        in[member] = false;
    }

    @Override
    public void weigh(int member, long weightMilli) {
        weight[member] = weightMilli;
    }

    @Override
    public int first(long newKey) {
        key = newKey;
        lastScore = -1;
        lastMember = NOBODY;
        return next();
    }

    /** The best of those that come after the last one said; equal scores in list order. */
    @Override
    public int next() {
        double bestScore = Double.POSITIVE_INFINITY;
        int best = NOBODY;
        for (int member = 0; member < in.length; member++) {
            if (!in[member] || weight[member] == 0) {
                continue;
            }
            double drawn = (Keys.of(key ^ nameHash[member]) >>> 11) * 0x1.0p-53;
            if (drawn / weight[member] >= bestScore) {
                continue;
            }
            double score = -StrictMath.log1p(-drawn) / weight[member];
            boolean later = score > lastScore || (score == lastScore && member > lastMember);
            if (later && score < bestScore) {
                bestScore = score;
                best = member;
            }
        }
        lastScore = bestScore;
        lastMember = best;
        return best;
    }
}
