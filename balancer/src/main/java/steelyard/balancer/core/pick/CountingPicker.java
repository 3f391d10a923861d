package steelyard.balancer.core.pick;

import java.util.Arrays;

/** What methods that look at their members one by one share: who may be picked, what it weighs, what it has in flight. */
abstract class CountingPicker implements Picker {
    final long[] weight;
    final int[] inFlight;
    private final boolean[] pickable;

    CountingPicker(int members) {
        weight = new long[members];
        inFlight = new int[members];
        pickable = new boolean[members];
        Arrays.fill(weight, MILLI);
    }

    /** Something about a member may have changed. */
    abstract void changed(int member);

    /** Whether a member may be picked and weighs anything. */
    final boolean isIn(int member) {
        return pickable[member] && weight[member] > 0;
    }

    @Override
    public final void enter(int member) {
        pickable[member] = true;
        changed(member);
    }

    @Override
    public final void leave(int member) {
        pickable[member] = false;
        changed(member);
    }

    @Override
    public final void weigh(int member, long weightMilli) {
        weight[member] = weightMilli;
        changed(member);
    }

    @Override
    public void began(int member, int count, long nowNanos) {
        inFlight[member] = count;
        changed(member);
    }

    @Override
    public void ended(int member, int count, boolean answered, long nowNanos) {
        inFlight[member] = count;
        changed(member);
    }

    @Override
    public final boolean takesTurns() {
        return false;
    }
}
