package steelyard.balancer.core.pick;

import java.util.Arrays;

/** Fewest in flight over effective weight; ties in rotation, beginning after the last one served. */
public final class LeastConnections extends TournamentPicker {
    private final int[] inFlight;
    private final long[] weight;
    private int last = NOBODY;

    public LeastConnections(int members) {
        super(members);
        inFlight = new int[members];
        weight = new long[members];
        Arrays.fill(weight, MILLI);
    }

    /** Fractions are compared by cross multiplication: a million in flight times the greatest weight fits a long. */
    @Override
    public boolean beats(int challenger, int holder) {
        return inFlight[challenger] * weight[holder] < inFlight[holder] * weight[challenger];
    }

    @Override
    int next(long nowNanos) {
        int member = tournament.bestAfter(last);
        if (member != NOBODY) {
            last = member;
        }
        return member;
    }

    @Override
    public void began(int member, int count, long nowNanos) {
        count(member, count);
    }

    @Override
    public void ended(int member, int count, boolean answered, long nowNanos) {
        count(member, count);
    }

    private void count(int member, int count) {
        inFlight[member] = count;
        tournament.changed(member);
    }

    @Override
    public void weigh(int member, long weightMilli) {
        weight[member] = weightMilli;
        tournament.changed(member);
        weighty(member, weightMilli > 0);
    }

    @Override
    public boolean takesTurns() {
        return false;
    }
}
