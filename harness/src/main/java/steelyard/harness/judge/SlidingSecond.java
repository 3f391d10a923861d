package steelyard.harness.judge;

import steelyard.harness.record.Slice;

/**
 * Counts over stretches of 1 s, one of which begins every 100 ms from an instant on. Counting goes on in the current
 * tenth; {@link #advance} closes those that are over. Hooks say when a tenth ends, a whole second has, and the next tenth begins.
 */
abstract class SlidingSecond {
    /** Tenths of a second that a stretch has. */
    static final int TENTHS = (int) (1_000_000_000L / Slice.NANOS);

    private final int[][] counts;
    private final long[] sums;
    private long originNanos;
    private int tenth;
    private boolean begun;

    /** @param columns things that are counted side by side */
    SlidingSecond(int columns) {
        counts = new int[TENTHS][columns];
        sums = new long[columns];
    }

    /** The first stretch begins now. */
    void begin(long atNanos) {
        originNanos = atNanos;
        begun = true;
    }

    /** Closes every tenth that ended by then. */
    final void advance(long atNanos) {
        while (begun && atNanos - originNanos >= (tenth + 1) * Slice.NANOS) {
            tenthEnds(tenth, originNanos + (tenth + 1) * Slice.NANOS);
            if (tenth >= TENTHS - 1) {
                secondEnds(tenth - TENTHS + 1);
            }
            tenth++;
            int[] oldest = counts[tenth % TENTHS];
            for (int column = 0; column < oldest.length; column++) {
                sums[column] -= oldest[column];
                oldest[column] = 0;
            }
            tenthBegins(tenth);
        }
    }

    /** Counts one in the current tenth. */
    final void add(int column) {
        if (begun) {
            counts[tenth % TENTHS][column]++;
            sums[column]++;
        }
    }

    /** The count of the stretch that ends; for {@link #secondEnds}. */
    final long sum(int column) {
        return sums[column];
    }

    /** A tenth ends; before the stretch that it completes. */
    void tenthEnds(int number, long atNanos) {}

    /** A tenth begins; after the stretch that ended with the one before. */
    void tenthBegins(int number) {}

    /** A stretch of 1 s ends; {@code number} counts from 0, it began {@code number} tenths behind the first. */
    abstract void secondEnds(int number);
}
