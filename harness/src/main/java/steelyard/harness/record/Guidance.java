package steelyard.harness.record;

/**
 * By backend: whether its weight goes by a reading of its load, or by the one that was set since readings fail to come.
 * Tells a change from a repetition; that a first reading comes is none.
 */
public final class Guidance {
    private final boolean[] lost;

    public Guidance(int backends) {
        lost = new boolean[backends];
    }

    /**
     * Takes what was told of a reading.
     *
     * @return whether it changed what the weight goes by
     */
    public boolean changes(int backend, boolean fresh) {
        boolean changed = lost[backend] == fresh;
        lost[backend] = !fresh;
        return changed;
    }

    /** How many weights go by what was set since readings fail to come. */
    public int lost() {
        int count = 0;
        for (boolean each : lost) {
            count += each ? 1 : 0;
        }
        return count;
    }
}
