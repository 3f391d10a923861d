package steelyard.balancer.core.pick;

/** Whole numbers out of 64 random bits, by multiplication: without a division, and without a loop. */
final class Draw {
    /** The bits that count: the sign bit is left out, so that signed arithmetic does. */
    private static final int BITS = 63;

    private Draw() {}

    /** Uniform from 0 to {@code bound - 1}; off by at most bound x 2^-63. */
    static long below(long bound, long bits) {
        long drawn = bits >>> 1;
        return Math.multiplyHigh(drawn, bound) << 1 | drawn * bound >>> BITS;
    }

    /** What {@link #below} left unused of the bits: again uniform, and independent of the number drawn. */
    static long rest(long bound, long bits) {
        return (bits >>> 1) * bound << 1;
    }
}
