package steelyard.balancer.core.pick;

/**
 * The shortest expected delay of all, (in flight + 1) x mean service time / weight; ties in rotation, members not seen first
 * (Banawan, Zahorjan, INFOCOM 1989, from memory). {@link ServiceTimes} says what the mean is.
 *
 * <p>A mean moves only when an answer comes, so a tournament replayed at events knows the best at any time. But the members of
 * which nothing was seen count at the mean of the others, which moves with every answer of anybody. They have a tournament
 * of their own, in which that common factor plays no part, and the two winners are compared at the pick.
 */
public final class ExpectedDelayOfAll extends CountingPicker {
    private final ServiceTimes times;
    private final double[] rank;
    private final Tournament seen;
    private final Tournament unseen;
    private int last = NOBODY;

    /** @param memoryNanos the time in which what was seen loses weight by a factor of e */
    public ExpectedDelayOfAll(int members, long memoryNanos) {
        super(members);
        times = new ServiceTimes(members, memoryNanos);
        rank = new double[members];
        seen = new Tournament(members, this::beats);
        unseen = new Tournament(members, this::beats);
    }

    private boolean beats(int challenger, int holder) {
        return rank[challenger] < rank[holder];
    }

    @Override
    public int pick(long request, int attempt, long key, int[] tried, int triedCount, long nowNanos) {
        for (int gone = times.forgetOne(nowNanos); gone != NOBODY; gone = times.forgetOne(nowNanos)) {
            changed(gone);
        }
        for (int i = 0; i < triedCount; i++) {
            seen.leave(tried[i]);
            unseen.leave(tried[i]);
        }
        int picked = shortest();
        for (int i = 0; i < triedCount; i++) {
            changed(tried[i]);
        }
        if (picked != NOBODY) {
            last = picked;
        }
        return picked;
    }

    /** Of equal delays that of the member not seen: this is how it comes to be seen. */
    private int shortest() {
        int known = seen.bestAfter(last);
        int unknown = unseen.bestAfter(last);
        if (known == NOBODY || unknown == NOBODY) {
            return known == NOBODY ? unknown : known;
        }
        return rank[unknown] * times.meanOfMeans() <= rank[known] ? unknown : known;
    }

    /** Puts a member where it belongs, by its delay where that is known, else by what its delay is in proportion to. */
    @Override
    void changed(int member) {
        seen.leave(member);
        unseen.leave(member);
        if (!isIn(member)) {
            return;
        }
        double share = (inFlight[member] + 1.0) / weight[member];
        boolean known = times.seen(member);
        rank[member] = known ? share * times.mean(member) : share;
        (known ? seen : unseen).enter(member);
    }

    @Override
    public void began(int member, int count, long nowNanos) {
        times.began(member, nowNanos);
        super.began(member, count, nowNanos);
    }

    @Override
    public void ended(int member, int count, boolean answered, long nowNanos) {
        times.ended(member, count, answered, nowNanos);
        super.ended(member, count, answered, nowNanos);
    }
}
