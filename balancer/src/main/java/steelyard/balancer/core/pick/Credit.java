package steelyard.balancer.core.pick;

/**
 * How members that warm up pass turns: the ramp fraction is added to a member's credit at each of its turns; it is served
 * when the credit reaches one, and pays one.
 *
 * <pre>
 * fraction  0.4  0.4  0.5  0.5  0.6  0.6     credit counts in billionths, so that ten tenths are one
 * credit    0.4  0.8  1.3  0.8  1.4  1.0
 * served     -    -   yes   -   yes  yes
 * </pre>
 */
final class Credit {
    private final Ramp ramp;
    private final long[] credit;

    Credit(int members, Ramp ramp) {
        this.ramp = ramp;
        credit = new long[members];
    }

    /** A member returns: it begins without credit. */
    void clear(int member) {
        credit[member] = 0;
    }

    /** Whether a member whose turn it is may be served at this turn. */
    boolean serves(int member, long nowNanos) {
        long fraction = ramp.fraction(member, nowNanos);
        if (fraction >= Ramp.FULL) {
            return true;
        }
        credit[member] += fraction;
        if (credit[member] < Ramp.FULL) {
            return false;
        }
        credit[member] -= Ramp.FULL;
        return true;
    }
}
