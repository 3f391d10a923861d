package steelyard.harness.conduct;

import java.util.concurrent.atomic.AtomicIntegerArray;
import steelyard.drills.model.Cue;

/** Which backends cues have killed, and which they have taken out. Told by one thread; any may ask. */
final class Absent {
    private final AtomicIntegerArray killed;
    private final AtomicIntegerArray out;

    /** @param backends how many there are; all are there at first */
    Absent(int backends) {
        killed = new AtomicIntegerArray(backends);
        out = new AtomicIntegerArray(backends);
    }

    void carriedOut(Cue.Kind kind, int backend) {
        switch (kind) {
            case KILL -> killed.set(backend, 1);
            case REVIVE -> killed.set(backend, 0);
            case DRAIN, WITHDRAW -> out.set(backend, 1);
            case ADMIT -> out.set(backend, 0);
            case SLOW, FAIL, HANG, REFUSE, FAIL_PROBE, FLAP_PROBE, LOAD, FILL, HEAL, REWEIGH, RETUNE, SURGE -> {
                // Nobody comes or goes.
            }
        }
    }

    boolean killed(int backend) {
        return killed.get(backend) != 0;
    }

    /** Drained or withdrawn, and not admitted since. */
    boolean out(int backend) {
        return out.get(backend) != 0;
    }
}
