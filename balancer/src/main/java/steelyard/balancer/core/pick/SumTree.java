package steelyard.balancer.core.pick;

/**
 * Sums over a list of numbers, kept while they change one at a time: each inner node holds the sum of its two halves, so a
 * change and a search take log2(n) steps, and nothing is rounded.
 */
final class SumTree {
    private final int leaves;
    private final long[] sum;

    SumTree(int size) {
        leaves = Math.max(1, Integer.highestOneBit(Math.max(1, size - 1)) << 1);
        sum = new long[2 * leaves];
    }

    long total() {
        return sum[1];
    }

    /** Changes the number at a place; at least 0. */
    void set(int place, long value) {
        long change = value - sum[leaves + place];
        for (int node = leaves + place; node > 0; node >>= 1) {
            sum[node] += change;
        }
    }

    /**
     * The place in whose stretch a point lies, when the numbers are laid end to end.
     *
     * @param point from 0, below {@link #total}
     */
    int find(long point) {
        int node = 1;
        long rest = point;
        while (node < leaves) {
            node <<= 1;
            if (rest >= sum[node]) {
                rest -= sum[node];
                node++;
            }
        }
        return node - leaves;
    }
}
