package steelyard.balancer.core.pick;

/**
 * The alias method: a weighted draw in two looks, however many there are to draw from (Walker, ACM TOMS 3(3) 1977; filled as
 * Vose, IEEE TSE 17(9) 1991).
 *
 * <p>Every place has a cell of the same width, the mean weight. A place that weighs less leaves room in its cell, and one
 * that weighs more fills it: a cell has at most two owners. To draw is to hit a cell and then one of its owners.
 *
 * <pre>
 * weights A 1, B 2, C 6, width 3     cell A: A 1, C 2     cell B: B 2, C 1     cell C: C 3
 * </pre>
 *
 * <p>In whole numbers (a weight counts as weight x places, the width is the sum) every cell fills exactly, and nothing is
 * left over that a rounding would have to explain.
 */
final class AliasTable {
    private final long[] own;
    private final int[] alias;
    private final int[] work;
    private long width;

    AliasTable(int size) {
        own = new long[size];
        alias = new int[size];
        work = new int[size];
    }

    /** Fills the table in as many steps as there are places. The sum of the weights, times their number, fits a long. */
    void fill(long[] weights, long sum) {
        width = sum;
        int size = own.length;
        int poor = 0;
        int rich = size;
        for (int place = 0; place < size; place++) {
            own[place] = weights[place] * size;
            if (own[place] < width) {
                work[poor++] = place;
            } else {
                work[--rich] = place;
            }
        }
        while (poor > 0) {
            int taker = work[--poor];
            int giver = work[rich];
            alias[taker] = giver;
            own[giver] -= width - own[taker];
            if (own[giver] < width) {
                rich++;
                work[poor++] = giver;
            }
        }
    }

    /** The place that 64 random bits draw; only after {@link #fill} with a sum above 0. */
    int draw(long bits) {
        int cell = (int) Draw.below(own.length, bits);
        long point = Draw.below(width, Draw.rest(own.length, bits));
        return point < own[cell] ? cell : alias[cell];
    }
}
