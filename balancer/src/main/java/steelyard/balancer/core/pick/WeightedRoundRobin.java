package steelyard.balancer.core.pick;

/**
 * Interleaved weighted round robin over {@link Turns}; ties in list order. Weights are whole: thousandths are cut off.
 *
 * <p>A warming member lets turns pass unserved by {@link Credit}; the pick goes on to the next place.
 */
public final class WeightedRoundRobin extends TournamentPicker {
    private final Turns turns;
    private final Credit credit;

    public WeightedRoundRobin(int members, Ramp ramp) {
        super(members);
        turns = new Turns(members);
        credit = new Credit(members, ramp);
    }

    @Override
    public boolean beats(int challenger, int holder) {
        return turns.before(challenger, holder);
    }

    @Override
    int next(long nowNanos) {
        while (true) {
            int member = tournament.best();
            if (member == NOBODY || serves(member, nowNanos)) {
                return member;
            }
        }
    }

    /**
     * One turn of a whole group, such as a host: the first member that may be served now, each asked once; {@link
     * #NOBODY} when none may, and the group's turn passes.
     *
     * @param asked room for as many members as there are
     */
    int nextOfGroup(int[] asked, long nowNanos) {
        int count = 0;
        int member = tournament.best();
        while (member != NOBODY && !serves(member, nowNanos)) {
            asked[count++] = member;
            hide(member);
            member = tournament.best();
        }
        for (int i = 0; i < count; i++) {
            show(asked[i]);
        }
        return member;
    }

    boolean isEmpty() {
        return tournament.best() == NOBODY;
    }

    private boolean serves(int member, long nowNanos) {
        turns.take(member);
        tournament.changed(member);
        return credit.serves(member, nowNanos);
    }

    @Override
    void seat(int member) {
        credit.clear(member);
        int first = tournament.best();
        if (first != NOBODY) {
            turns.join(member, first);
        }
    }

    @Override
    public void weigh(int member, long weightMilli) {
        int weight = (int) (weightMilli / MILLI);
        if (weight == turns.weight(member)) {
            return;
        }
        turns.weigh(member, weight);
        boolean wasIn = tournament.has(member);
        hide(member);
        int first = tournament.best();
        if (wasIn && weight > 0 && first != NOBODY) {
            turns.join(member, first);
        }
        if (wasIn) {
            tournament.enter(member);
        }
        weighty(member, weight > 0);
    }

    @Override
    public boolean takesTurns() {
        return true;
    }
}
