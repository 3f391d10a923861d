package steelyard.harness.conduct;

import java.util.BitSet;
import steelyard.drills.model.Cue;

/**
 * Which backends cues have killed, and which they have taken out. Told by one thread; any may ask: a set is never
 * changed once it can be seen.
 */
final class Absent {
    private volatile BitSet killed = new BitSet();
    private volatile BitSet out = new BitSet();

    void carriedOut(Cue.Kind kind, int backend) {
        switch (kind) {
            case KILL -> killed = with(killed, backend, true);
            case REVIVE -> killed = with(killed, backend, false);
            case DRAIN, WITHDRAW -> out = with(out, backend, true);
            case ADMIT -> out = with(out, backend, false);
            case SLOW, FAIL, HANG, REFUSE, FAIL_PROBE, FLAP_PROBE, LOAD, FILL, HEAL, REWEIGH, RETUNE, SURGE -> {
                // Nobody comes or goes.
            }
        }
    }

    private static BitSet with(BitSet before, int backend, boolean in) {
        BitSet after = (BitSet) before.clone();
        after.set(backend, in);
        return after;
    }

    boolean killed(int backend) {
        return killed.get(backend);
    }

    /** Drained or withdrawn, and not admitted since. */
    boolean out(int backend) {
        return out.get(backend);
    }
}
