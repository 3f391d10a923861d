package steelyard.balancer.core.pick;

/** Next pickable member in list order after the last one served. Weights play no part. */
public final class RoundRobin extends TournamentPicker {
    private final Credit credit;
    private int last = NOBODY;

    public RoundRobin(int members, Ramp ramp) {
        super(members);
        credit = new Credit(members, ramp);
    }

    @Override
    public boolean beats(int challenger, int holder) {
        return false;
    }

    @Override
    int next(long nowNanos) {
        while (true) {
            int member = tournament.bestAfter(last);
            if (member == NOBODY) {
                return NOBODY;
            }
            last = member;
            if (credit.serves(member, nowNanos)) {
                return member;
            }
        }
    }

    @Override
    void seat(int member) {
        credit.clear(member);
    }

    @Override
    public void weigh(int member, long weightMilli) {}

    @Override
    public boolean takesTurns() {
        return true;
    }

    @Override
    public boolean weighs() {
        return false;
    }
}
