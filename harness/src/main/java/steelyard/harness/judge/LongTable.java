package steelyard.harness.judge;

import java.util.Arrays;

/**
 * Places for keys of 64 bits: open addressing with linear probing, half full at most, removal by shifting back, so that
 * nothing is left behind and nothing is allocated but at growth. A key's place is where its columns are kept by the
 * owner, who is told when a place moves. Not thread-safe.
 */
abstract class LongTable {
    private static final int FIRST_CAPACITY = 1_024;
    private static final int NONE = -1;
    /** Stands in a place without a key; no key has this value. */
    private static final long EMPTY = Long.MIN_VALUE;

    private long[] keys = emptyKeys(FIRST_CAPACITY);
    private int size;

    /** The place of a key, or -1. A key is any number but the least. */
    final int find(long key) {
        int place = home(key);
        while (keys[place] != key) {
            if (keys[place] == EMPTY) {
                return NONE;
            }
            place = (place + 1) & (keys.length - 1);
        }
        return place;
    }

    /** A place for a key that is not there yet; its columns hold whatever they held. */
    final int add(long key) {
        if (size * 2 >= keys.length) {
            grow();
        }
        int place = free(key);
        keys[place] = key;
        size++;
        return place;
    }

    /** Gives a place up; others may move. */
    final void remove(int place) {
        int hole = place;
        int mask = keys.length - 1;
        for (int next = (hole + 1) & mask; keys[next] != EMPTY; next = (next + 1) & mask) {
            // A key may fill the hole unless its home lies behind it.
            if (((next - home(keys[next])) & mask) >= ((next - hole) & mask)) {
                keys[hole] = keys[next];
                moved(next, hole);
                hole = next;
            }
        }
        keys[hole] = EMPTY;
        size--;
    }

    final int size() {
        return size;
    }

    final int capacity() {
        return keys.length;
    }

    final boolean used(int place) {
        return keys[place] != EMPTY;
    }

    final long key(int place) {
        return keys[place];
    }

    /** The columns of one place go to another. */
    abstract void moved(int from, int to);

    /** Columns grow to a capacity; those of each old place go to the place that {@code places} says, -1 for none. */
    abstract void grown(int capacity, int[] places);

    private void grow() {
        long[] oldKeys = keys;
        keys = emptyKeys(oldKeys.length * 2);
        int[] places = new int[oldKeys.length];
        Arrays.fill(places, NONE);
        for (int old = 0; old < oldKeys.length; old++) {
            if (oldKeys[old] != EMPTY) {
                int place = free(oldKeys[old]);
                keys[place] = oldKeys[old];
                places[old] = place;
            }
        }
        grown(keys.length, places);
    }

    private int free(long key) {
        int place = home(key);
        while (keys[place] != EMPTY) {
            place = (place + 1) & (keys.length - 1);
        }
        return place;
    }

    private static long[] emptyKeys(int capacity) {
        long[] keys = new long[capacity];
        Arrays.fill(keys, EMPTY);
        return keys;
    }

    private int home(long key) {
        // Multiplication by the odd number nearest 2^64 over the golden ratio spreads running numbers evenly.
        return (int) ((key * 0x9E3779B97F4A7C15L) >>> 32) & (keys.length - 1);
    }
}
