package steelyard.balancer.core.pick;

import java.util.Arrays;

/**
 * Stride scheduling: the smallest pass is next, then grows by the stride 1/weight (Waldspurger, Weihl, MIT/LCS/TM-528,
 * 1995). The first pass is one stride; ties in list order.
 *
 * <p>Strides as rounded integers break true ties in a way that depends on the rounding. Here a pass is a whole number and
 * a fraction over the member's own weight, so that equal passes are equal: whole + parts / (weight x 2^16). Two passes are
 * compared by cross multiplication in 128 bits. A turn adds 2^16 parts; the 16 bits below are used only when a change
 * carries over what remained of a stride, which is so rounded to a 65,536th of it.
 *
 * <p>What remains is pass - pool's pass, where the pool's pass grows by one over the sum of the weights a turn. A member
 * that leaves keeps it and rejoins at the pool's pass plus that; one whose weight changes keeps it counted in strides,
 * which is the thesis's scaling by old over new weight.
 */
public final class Stride extends TournamentPicker {
    private static final int SHIFT = 16;
    private static final long ONE = 1L << SHIFT;

    private final long[] weight;
    private final long[] whole;
    private final long[] parts;
    private final long[] remains;

    private long totalWeight;
    private long poolWhole;
    private long poolParts;

    public Stride(int members) {
        super(members);
        weight = new long[members];
        whole = new long[members];
        parts = new long[members];
        remains = new long[members];
        Arrays.fill(weight, MILLI);
        Arrays.fill(remains, ONE);
    }

    @Override
    public boolean beats(int challenger, int holder) {
        if (whole[challenger] != whole[holder]) {
            return whole[challenger] < whole[holder];
        }
        long mine = weight[challenger];
        long theirs = weight[holder];
        return mine == theirs
                ? parts[challenger] < parts[holder]
                : lessProduct(parts[challenger], theirs, parts[holder], mine);
    }

    /** Whether a x b is less than c x d; all at least 0. */
    private static boolean lessProduct(long a, long b, long c, long d) {
        long left = Math.multiplyHigh(a, b);
        long right = Math.multiplyHigh(c, d);
        return left != right ? left < right : Long.compareUnsigned(a * b, c * d) < 0;
    }

    @Override
    int next(long nowNanos) {
        int member = tournament.best();
        if (member == NOBODY) {
            return NOBODY;
        }
        setPass(member, whole[member], parts[member] + ONE);
        tournament.changed(member);
        poolParts += ONE;
        if (poolParts >= totalWeight << SHIFT) {
            poolParts -= totalWeight << SHIFT;
            poolWhole++;
        }
        return member;
    }

    @Override
    void seat(int member) {
        total(totalWeight + weight[member]);
        place(member);
    }

    @Override
    void unseat(int member) {
        remains[member] = remaining(member);
        total(totalWeight - weight[member]);
    }

    @Override
    public void weigh(int member, long weightMilli) {
        if (weightMilli == weight[member]) {
            return;
        }
        weighty(member, false);
        weight[member] = weightMilli;
        weighty(member, weightMilli > 0);
    }

    @Override
    public boolean takesTurns() {
        return false;
    }

    private void total(long newTotal) {
        poolParts = totalWeight == 0 ? 0 : Math.round((double) poolParts * newTotal / totalWeight);
        totalWeight = newTotal;
    }

    /** The pool's pass in the member's own parts. */
    private long poolPartsFor(int member) {
        return totalWeight == 0 ? 0 : Math.round((double) poolParts * weight[member] / totalWeight);
    }

    private long remaining(int member) {
        return (whole[member] - poolWhole) * (weight[member] << SHIFT) + parts[member] - poolPartsFor(member);
    }

    private void place(int member) {
        setPass(member, poolWhole, poolPartsFor(member) + remains[member]);
    }

    private void setPass(int member, long newWhole, long newParts) {
        long one = weight[member] << SHIFT;
        whole[member] = newWhole + Math.floorDiv(newParts, one);
        parts[member] = Math.floorMod(newParts, one);
    }
}
