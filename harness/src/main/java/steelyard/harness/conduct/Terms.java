package steelyard.harness.conduct;

import java.util.Arrays;
import steelyard.drills.model.Cue;

/**
 * Which cue last had a say about each kind of fault of each member (backend or traffic stream), so that the end of a
 * {@code for:} undoes only what its own cue set: not a later fault of the same kind, and not what was healed since.
 */
final class Terms {
    private static final int NOBODY = -1;
    private final int[][] holder;

    Terms(int members) {
        holder = new int[members][Cue.Kind.values().length];
        for (int[] each : holder) {
            Arrays.fill(each, NOBODY);
        }
    }

    /** The cue with this running number was carried out on a member. */
    void carriedOut(Cue.Kind kind, int number, int member) {
        int[] ofMember = holder[member];
        switch (kind) {
            case HEAL -> {
                int kill = ofMember[Cue.Kind.KILL.ordinal()];
                Arrays.fill(ofMember, NOBODY);
                ofMember[Cue.Kind.KILL.ordinal()] = kill;
            }
            case REVIVE -> revived(ofMember);
            case SLOW, FAIL, HANG, REFUSE, KILL, FAIL_PROBE, FLAP_PROBE, LOAD, FILL, SURGE ->
                ofMember[kind.ordinal()] = number;
            case REWEIGH, DRAIN, ADMIT, WITHDRAW, RETUNE -> {
                // Never ended by time.
            }
        }
    }

    /** Whether the fault in force is still the one that this cue set. */
    boolean holds(Cue.Kind kind, int number, int member) {
        return holder[member][kind.ordinal()] == number;
    }

    /** Its end was carried out. */
    void ended(Cue.Kind kind, int member) {
        if (kind == Cue.Kind.KILL) {
            revived(holder[member]);
        } else {
            holder[member][kind.ordinal()] = NOBODY;
        }
    }

    /** What was killed starts again without any fault; what runs is left as it is. */
    private static void revived(int[] ofMember) {
        if (ofMember[Cue.Kind.KILL.ordinal()] != NOBODY) {
            Arrays.fill(ofMember, NOBODY);
        }
    }
}
