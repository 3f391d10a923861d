package steelyard.balancer.core.pick;

import java.util.Arrays;

/**
 * Places in the interleaved order: each holder has a place (cycle, turn), and the smallest place is next.
 *
 * <p>In a cycle of max(w) rounds, round r serves in list order every holder with w &gt;= r (Katevenis, Sidiropoulos,
 * Courcoubetis, IEEE JSAC 9(8) 1991; Tabatabaee, Le Boudec, Boyer, IEICE Trans. Commun. E104-B(12) 2021). Kept as a place
 * for each instead of a running round, the rule needs no walk over those that cannot be served: a turn taken moves a
 * place from (c, t) to (c, t + 1), and after the w-th turn to (c + 1, 0). Since t &lt; w &lt;= max(w), the key
 * cycle x max(w) + turn orders places as the pair (cycle, turn) does, whatever max(w) is; so the pair is compared and no
 * weight change moves anybody else.
 *
 * <pre>
 * weights A 1, B 2, C 3     round 1: A B C    round 2: B C    round 3: C
 * places after A B C B:     A (1,0)  B (1,0)  C (0,1)  ->  C, C, then A
 * </pre>
 */
final class Turns {
    /** A place is cycle x 2^20 + turn: one number to compare, and a turn below the greatest weight fits. */
    private static final int TURN_BITS = 20;

    private static final long TURN = (1L << TURN_BITS) - 1;

    private final long[] place;
    private final int[] weight;

    Turns(int holders) {
        place = new long[holders];
        weight = new int[holders];
        Arrays.fill(weight, 1);
    }

    int holders() {
        return weight.length;
    }

    boolean before(int holder, int other) {
        return place[holder] < place[other];
    }

    int weight(int holder) {
        return weight[holder];
    }

    void take(int holder) {
        place[holder]++;
        wrap(holder);
    }

    /** Changes a weight; a turn that the new weight does not have becomes the next cycle's first. */
    void weigh(int holder, int newWeight) {
        weight[holder] = newWeight;
        wrap(holder);
    }

    /**
     * Keeps a newcomer from catching up in a burst: when its place is before that of {@code first}, the first of the
     * others, it takes that place, or the next cycle's where its own weight has no such turn.
     */
    void join(int holder, int first) {
        if (before(holder, first)) {
            place[holder] = place[first];
            wrap(holder);
        }
    }

    private void wrap(int holder) {
        if ((place[holder] & TURN) >= weight[holder]) {
            place[holder] = (place[holder] | TURN) + 1;
        }
    }
}
