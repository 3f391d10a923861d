package steelyard.balancer.core.pick;

/**
 * Draws members by weight, some left out, while weights change.
 *
 * <p>An alias table draws in O(1) but is filled anew, in n steps, after any change; a sum tree takes a change in log2(n)
 * steps but also needs as many for each draw. A ramp changes weights a thousand times and load readings do so without
 * end, so neither alone will do. Both are kept: the tree always, the table only once n draws have followed one another
 * without a change. So a refill is paid for by the draws before it, and where weights never rest a draw costs log2(n) and
 * no refill happens at all.
 *
 * <p>Members left out are drawn again a few times, and then taken off the tree for one last draw. Each way is exact by itself:
 * what comes is distributed as the weights of the others.
 *
 * <p>Not thread-safe. Nothing is allocated after construction.
 */
final class Urn {
    /** What {@link #draw} says when there is nothing to draw from. */
    static final int NOBODY = Tournament.NOBODY;

    /** As many lots as one draw may use. */
    static final int LOTS = 16;

    private static final int REDRAWS = LOTS - 1;

    private final Lots lots;
    private final long[] weight;
    private final SumTree tree;
    private final AliasTable table;
    private boolean tableFits;
    private int drawsAtRest;

    Urn(int members, Lots lots) {
        this.lots = lots;
        weight = new long[members];
        tree = new SumTree(members);
        table = new AliasTable(members);
    }

    /** Sets what a member weighs, from 0. */
    void put(int member, long newWeight) {
        if (weight[member] != newWeight) {
            weight[member] = newWeight;
            tree.set(member, newWeight);
            tableFits = false;
            drawsAtRest = 0;
        }
    }

    /**
     * Draws a member.
     *
     * @param lot the first of the {@link #LOTS} lots of this pick that the draw may use
     * @param out members left out, in the first {@code outCount} entries
     * @param alsoOut one more, or {@link #NOBODY}
     */
    int draw(long request, int attempt, int lot, int[] out, int outCount, int alsoOut) {
        if (tree.total() == 0) {
            return NOBODY;
        }
        if (tableFits || comesToRest()) {
            for (int i = 0; i < REDRAWS; i++) {
                int member = table.draw(lots.bits(request, attempt, lot + i));
                if (member != alsoOut && !among(member, out, outCount)) {
                    return member;
                }
            }
        }
        return drawFromTree(lots.bits(request, attempt, lot + REDRAWS), out, outCount, alsoOut);
    }

    private boolean comesToRest() {
        drawsAtRest++;
        if (drawsAtRest <= weight.length) {
            return false;
        }
        table.fill(weight, tree.total());
        tableFits = true;
        return true;
    }

    private int drawFromTree(long bits, int[] out, int outCount, int alsoOut) {
        for (int i = 0; i < outCount; i++) {
            tree.set(out[i], 0);
        }
        if (alsoOut != NOBODY) {
            tree.set(alsoOut, 0);
        }
        long total = tree.total();
        int member = total == 0 ? NOBODY : tree.find(Draw.below(total, bits));
        for (int i = 0; i < outCount; i++) {
            tree.set(out[i], weight[out[i]]);
        }
        if (alsoOut != NOBODY) {
            tree.set(alsoOut, weight[alsoOut]);
        }
        return member;
    }

    static boolean among(int member, int[] some, int count) {
        for (int i = 0; i < count; i++) {
            if (some[i] == member) {
                return true;
            }
        }
        return false;
    }
}
