package steelyard.balancer.core.pick;

import java.util.Arrays;

/**
 * A lookup table that members fill in turn: each claims the first free place of its own permutation of all places, so that all
 * own the same number, but for one (Eisenbud and others, NSDI 2016, section 3.4). A key belongs to the member at its place,
 * and passes on to those at the next ones.
 *
 * <p>A member with half the weight of the heaviest claims at every other turn, and so on.
 *
 * <p>The size is a prime, so that every skip visits every place. Who comes or goes leaves some claims of others different too:
 * few keys move without need, but some do. The table is filled anew at the next walk after a change, in about size x
 * ln(size) steps where weights are alike.
 */
final class Permutation implements KeyTable {
    private final int[] offset;
    private final int[] skip;
    private final long[] weight;
    private final boolean[] in;
    private final int[] table;
    private final int[] reached;
    private final long[] credit;

    private boolean changed;
    private int at;
    private int left;

    /**
     * @param nameHash of each member
     * @param size of the table
     * @throws IllegalArgumentException for a size that is not a prime
     */
    Permutation(long[] nameHash, int size) {
        this(
                Arrays.stream(nameHash)
                        .mapToInt(hash -> (int) Draw.below(size, Keys.of(hash, 0)))
                        .toArray(),
                Arrays.stream(nameHash)
                        .mapToInt(hash -> 1 + (int) Draw.below(size - 1, Keys.of(hash, 1)))
                        .toArray(),
                size);
    }

    /**
     * With permutations as they are given.
     *
     * @param offset the first place of each member's permutation
     * @param skip how much further each next one is, from 1
     */
    Permutation(int[] offset, int[] skip, int size) {
        for (int factor = 2; factor * factor <= size; factor++) {
            if (size % factor == 0) {
                throw new IllegalArgumentException("the size of a permutation table is a prime, not " + size);
            }
        }
        this.offset = offset;
        this.skip = skip;
        weight = new long[offset.length];
        in = new boolean[offset.length];
        table = new int[size];
        reached = new int[offset.length];
        credit = new long[offset.length];
        Arrays.fill(table, NOBODY);
    }

    @Override
    public void enter(int member) {
        changed |= !in[member];
        in[member] = true;
    }

    @Override
    public void leave(int member) {
        changed |= in[member];
        in[member] = false;
    }

    @Override
    public void weigh(int member, long weightMilli) {
        changed |= weight[member] != weightMilli;
        weight[member] = weightMilli;
    }

    @Override
    public int first(long key) {
        if (changed) {
            fill();
            changed = false;
        }
        at = (int) Draw.below(table.length, key);
        left = table[0] == NOBODY ? 0 : table.length;
        return next();
    }

    @Override
    public int next() {
        if (left == 0) {
            return NOBODY;
        }
        left--;
        int member = table[at];
        at = at + 1 < table.length ? at + 1 : 0;
        return member;
    }

    private void fill() {
        Arrays.fill(table, NOBODY);
        System.arraycopy(offset, 0, reached, 0, offset.length);
        Arrays.fill(credit, 0);
        long heaviest = 0;
        for (int member = 0; member < in.length; member++) {
            heaviest = in[member] ? Math.max(heaviest, weight[member]) : heaviest;
        }
        int free = heaviest == 0 ? 0 : table.length;
        while (free > 0) {
            for (int member = 0; member < in.length && free > 0; member++) {
                if (in[member] && takesTurn(member, heaviest)) {
                    claim(member);
                    free--;
                }
            }
        }
    }

    private boolean takesTurn(int member, long heaviest) {
        credit[member] += weight[member];
        if (credit[member] < heaviest) {
            return false;
        }
        credit[member] -= heaviest;
        return true;
    }

    private void claim(int member) {
        while (table[reached[member]] != NOBODY) {
            reached[member] = (int) (((long) reached[member] + skip[member]) % table.length);
        }
        table[reached[member]] = member;
    }

    /** Whom each place belongs to. */
    int[] places() {
        first(0);
        return table.clone();
    }
}
