package steelyard.balancer.core.pick;

/** Draws of a method that draws lots, made by key: the same numbers give the same draw. */
@FunctionalInterface
public interface Lots {
    /**
     * 64 bits, each set with chance one half.
     *
     * @param attempt from 1
     * @param draw the first, second ... of this pick, from 0 to 63
     */
    long bits(long request, int attempt, int draw);

    /** Uniform in [0, 1), a multiple of 2^-53. */
    default double unit(long request, int attempt, int draw) {
        return (bits(request, attempt, draw) >>> 11) * 0x1.0p-53;
    }
}
