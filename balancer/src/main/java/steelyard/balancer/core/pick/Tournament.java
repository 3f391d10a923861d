package steelyard.balancer.core.pick;

import java.util.Arrays;

/**
 * A tournament tree: who among the entered places is best, ties to the left.
 *
 * <p>Every method here asks the same two questions, "who is best" and "who is next in list order among the best", while
 * one place changes at a time. A heap answers only the first, a bit set only the second. A tournament over the list
 * answers both: each inner node holds the better of its two halves, the left one when they are equal, so the root is
 * the best and, of equals, the first in list order. A change replays log2(n) matches; nothing is allocated.
 *
 * <pre>
 *            1:c            places  a b c d, keys 7 5 3 3
 *          /     \
 *        2:b     3:c        c and d are equal: the left one wins
 *       /  \     /  \
 *      a    b   c    d
 * </pre>
 *
 * <p>Not thread-safe. Places are 0 to size - 1; others throw {@link IndexOutOfBoundsException}.
 */
public final class Tournament {
    /** What {@link #best()} says when no place is entered. */
    public static final int NOBODY = -1;

    /** When one place is better than another. */
    @FunctionalInterface
    public interface Order {
        /** Whether {@code challenger} is strictly better than {@code holder}; a strict weak order. */
        boolean beats(int challenger, int holder);
    }

    private final Order order;
    private final int leaves;
    private final int[] winner;

    public Tournament(int size, Order order) {
        this.order = order;
        leaves = Math.max(1, Integer.highestOneBit(Math.max(1, size - 1)) << 1);
        winner = new int[2 * leaves];
        Arrays.fill(winner, NOBODY);
    }

    public boolean has(int place) {
        return winner[leaves + place] != NOBODY;
    }

    /** Enters a place, or replays its matches when it is in already. */
    public void enter(int place) {
        winner[leaves + place] = place;
        replay(place);
    }

    /** Takes a place out; harmless when it is not in. */
    public void leave(int place) {
        winner[leaves + place] = NOBODY;
        replay(place);
    }

    /** Replays the matches of a place whose key changed; harmless when it is not in. */
    public void changed(int place) {
        if (has(place)) {
            replay(place);
        }
    }

    /** The best place, the first in list order among equals, or {@link #NOBODY}. */
    public int best() {
        return winner[1];
    }

    /**
     * The first place after {@code last} in list order that is as good as the best, going round at the end; {@link
     * #NOBODY} when none is entered.
     *
     * @param last a place, or -1 to begin at the front
     */
    public int bestAfter(int last) {
        int best = best();
        if (best == NOBODY || last < 0) {
            return best;
        }
        // Climbing from the leaf, each right-hand sibling covers the next stretch of the list, nearest first.
        for (int node = leaves + last; node > 1; node >>= 1) {
            if ((node & 1) == 0) {
                int next = winner[node + 1];
                if (next != NOBODY && !order.beats(best, next)) {
                    return next;
                }
            }
        }
        return best;
    }

    /** Plays a place's matches from its leaf up, as far as they can change anything. */
    private void replay(int place) {
        int node = leaves + place;
        int ours = winner[node];
        while (node > 1) {
            int rival = winner[node ^ 1];
            boolean weAreLeft = (node & 1) == 0;
            if (rival != NOBODY && (ours == NOBODY || beaten(ours, rival, weAreLeft))) {
                ours = rival;
            }
            node >>= 1;
            if (winner[node] == ours && ours != place) {
                return;
            }
            winner[node] = ours;
        }
    }

    /** The left one of a match needs only a draw. */
    private boolean beaten(int ours, int rival, boolean weAreLeft) {
        return weAreLeft ? order.beats(rival, ours) : !order.beats(ours, rival);
    }
}
