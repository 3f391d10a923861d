package steelyard.harness.judge;

import steelyard.harness.record.Slice;

/**
 * The greatest ratio of two counts over stretches of one length, one of which begins each slice; or the ratio over the
 * whole window. A stretch reaches no further than the window; one in which the lower count is zero has no ratio.
 */
final class Worst {
    private final Window window;
    private final int stretch;
    private final long[] above;
    private final long[] below;

    /** @param stretchNanos length of a stretch, counted in whole slices; 0 for the whole window */
    Worst(Window window, long stretchNanos) {
        this.window = window;
        int slices = stretchNanos == 0 ? 1 : window.slices();
        stretch = stretchNanos == 0 ? 1 : (int) Math.max(1, (stretchNanos + Slice.NANOS - 1) / Slice.NANOS);
        above = new long[slices];
        below = new long[slices];
    }

    /** Counts at an instant inside the window. */
    void add(long atNanos, int toAbove, int toBelow) {
        int slice = above.length == 1 ? 0 : window.slice(atNanos);
        above[slice] += toAbove;
        below[slice] += toBelow;
    }

    /** NaN when no stretch has a ratio. */
    double greatestRatio() {
        double greatest = Double.NaN;
        long sumAbove = 0;
        long sumBelow = 0;
        for (int end = 0; end < above.length; end++) {
            sumAbove += above[end];
            sumBelow += below[end];
            int begin = end - stretch + 1;
            boolean whole = begin >= 0 || end == above.length - 1;
            if (whole && sumBelow > 0) {
                double ratio = (double) sumAbove / sumBelow;
                greatest = Double.isNaN(greatest) ? ratio : Math.max(greatest, ratio);
            }
            if (begin >= 0) {
                sumAbove -= above[begin];
                sumBelow -= below[begin];
            }
        }
        return greatest;
    }
}
