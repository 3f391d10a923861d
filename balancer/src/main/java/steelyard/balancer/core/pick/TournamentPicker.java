package steelyard.balancer.core.pick;

import java.util.Arrays;

/** What the methods share: who is in, who may be, and leaving out those already tried. */
abstract class TournamentPicker implements Picker, Tournament.Order {
    final Tournament tournament;
    private final boolean[] pickable;
    private final boolean[] weighty;

    TournamentPicker(int members) {
        tournament = new Tournament(members, this);
        pickable = new boolean[members];
        weighty = new boolean[members];
        Arrays.fill(weighty, true);
    }

    /** Picks among those in the tournament and counts the turn. */
    abstract int next(long nowNanos);

    /** A member is about to come in: gives it the place that it takes among those that are. */
    void seat(int member) {}

    /** A member has just gone out. */
    void unseat(int member) {}

    @Override
    public final int pick(long request, int attempt, long key, int[] tried, int triedCount, long nowNanos) {
        for (int i = 0; i < triedCount; i++) {
            hide(tried[i]);
        }
        int picked = next(nowNanos);
        for (int i = 0; i < triedCount; i++) {
            show(tried[i]);
        }
        return picked;
    }

    @Override
    public final void enter(int member) {
        pickable[member] = true;
        settle(member);
    }

    @Override
    public final void leave(int member) {
        pickable[member] = false;
        settle(member);
    }

    /** Leaves a member out until {@link #show}, without touching its place. */
    final void hide(int member) {
        tournament.leave(member);
    }

    final void show(int member) {
        if (pickable[member] && weighty[member]) {
            tournament.enter(member);
        }
    }

    /** Notes whether a member weighs anything at all. */
    final void weighty(int member, boolean weighs) {
        weighty[member] = weighs;
        settle(member);
    }

    private void settle(int member) {
        boolean in = tournament.has(member);
        boolean belongs = pickable[member] && weighty[member];
        if (belongs && !in) {
            seat(member);
            tournament.enter(member);
        } else if (!belongs && in) {
            tournament.leave(member);
            unseat(member);
        }
    }
}
