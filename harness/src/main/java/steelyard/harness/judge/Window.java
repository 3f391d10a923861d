package steelyard.harness.judge;

import steelyard.harness.record.Slice;

/** A stretch of play time: from, itself inside, to, itself outside. */
record Window(long fromNanos, long toNanos) {

    boolean holds(long atNanos) {
        return atNanos >= fromNanos && atNanos < toNanos;
    }

    /** The slice in which an instant lies, counted from the slice in which the window begins. */
    int slice(long atNanos) {
        return (int) (atNanos / Slice.NANOS - fromNanos / Slice.NANOS);
    }

    /** How many slices the window touches. */
    int slices() {
        return slice(toNanos - 1) + 1;
    }

    /** How much of a span lies inside. */
    long overlapNanos(long beginNanos, long endNanos) {
        return Math.max(0, Math.min(endNanos, toNanos) - Math.max(beginNanos, fromNanos));
    }
}
