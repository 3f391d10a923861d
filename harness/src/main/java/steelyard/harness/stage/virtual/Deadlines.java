package steelyard.harness.stage.virtual;

import java.util.Arrays;

/**
 * Who has something to do first, among many of whom each has one deadline or none.
 *
 * <p>A tree of instants over the list: each inner node holds the earlier of its two children, so the root holds the first
 * of all. A deadline that moves is carried upwards as far as it changes anything, which is seldom far; only the one who
 * was first has to be replaced up to the root. The first by name is found by walking down along the root's instant, to
 * the left where both sides hold it.
 */
final class Deadlines {
    private final int leaves;
    private final long[] earliest;

    Deadlines(int size) {
        leaves = Math.max(1, Integer.highestOneBit(Math.max(1, size - 1)) << 1);
        earliest = new long[2 * leaves];
        Arrays.fill(earliest, Lane.NEVER);
    }

    /** Of the first; {@link Lane#NEVER} when nobody has one. */
    long first() {
        return earliest[1];
    }

    /** Who is first, in list order among equals; only while somebody has a deadline. */
    int whoIsFirst() {
        int node = 1;
        while (node < leaves) {
            int left = 2 * node;
            node = earliest[left] == earliest[1] ? left : left + 1;
        }
        return node - leaves;
    }

    /** Sets the deadline of one; {@link Lane#NEVER} takes it away. */
    void set(int who, long nanos) {
        int node = leaves + who;
        long here = nanos;
        while (earliest[node] != here) {
            earliest[node] = here;
            if (node == 1) {
                return;
            }
            here = Math.min(here, earliest[node ^ 1]);
            node >>= 1;
        }
    }
}
