package steelyard.harness.record;

import java.util.Arrays;

/** By backend: whether its weight goes by readings of its load, or by the one that was set. Tells a change from a repetition. */
public final class Guidance {
    private final Change[] latest;

    public Guidance(int backends) {
        latest = new Change[backends];
        Arrays.fill(latest, Change.NONE);
    }

    /** What has changed about what a weight goes by. */
    public enum Change {
        NONE,
        /** Its first reading has come. */
        BEGAN,
        /** Readings fail to come, so the set weight stands. */
        LOST,
        /** They come again. */
        BACK
    }

    /** Takes what was told of a reading. */
    public Change take(int backend, boolean fresh) {
        Change before = latest[backend];
        Change change = fresh ? fresh(before) : before == Change.LOST ? Change.NONE : Change.LOST;
        if (change != Change.NONE) {
            latest[backend] = change;
        }
        return change;
    }

    private static Change fresh(Change before) {
        return switch (before) {
            case NONE -> Change.BEGAN;
            case LOST -> Change.BACK;
            case BEGAN, BACK -> Change.NONE;
        };
    }

    /** How many weights go by what was set since readings fail to come. */
    public int lost() {
        int count = 0;
        for (Change each : latest) {
            count += each == Change.LOST ? 1 : 0;
        }
        return count;
    }
}
