package steelyard.harness.stage.virtual;

import java.util.Arrays;

/**
 * The rows of a table in columns, reused when what they stood for is over. A message names a row together with the leg it was
 * sent on ({@link #token}); the leg goes up with every step that makes older messages stale, and never comes back.
 */
abstract class Slots {
    private int[] leg;
    private int[] freed;
    private int freedCount;
    private int used;

    /** @param capacity above zero; that of the columns too */
    Slots(int capacity) {
        leg = new int[capacity];
        freed = new int[capacity];
    }

    /** Makes room for so many rows in every column. */
    abstract void grow(int capacity);

    /** How many rows stand for something. */
    final int open() {
        return used - freedCount;
    }

    /** Upper end of the rows ever used. */
    final int used() {
        return used;
    }

    /** A row for something new; what its columns hold is left from before. */
    final int takeSlot() {
        return freedCount > 0 ? freed[--freedCount] : fresh();
    }

    private int fresh() {
        if (used == leg.length) {
            int capacity = 2 * used;
            grow(capacity);
            leg = Arrays.copyOf(leg, capacity);
            freed = Arrays.copyOf(freed, capacity);
        }
        return used++;
    }

    /** What the row stood for is over, for everybody. */
    final void freeSlot(int slot) {
        nextLeg(slot);
        freed[freedCount++] = slot;
    }

    final void nextLeg(int slot) {
        leg[slot] = (leg[slot] + 1) & Integer.MAX_VALUE;
    }

    /** The row and its leg in one number, at least 0. */
    final long token(int slot) {
        return (long) leg[slot] << Integer.SIZE | slot;
    }

    /** The row that a token names. */
    static int of(long token) {
        return (int) token;
    }

    /** Whether the row is still on the leg of the token. */
    final boolean current(long token) {
        return leg[of(token)] == (int) (token >>> Integer.SIZE);
    }
}
