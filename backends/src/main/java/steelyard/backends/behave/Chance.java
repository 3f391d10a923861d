package steelyard.backends.behave;

/**
 * Draws by key: the same seed, stream and two key numbers give the same draw, whoever asks, whenever and in whatever
 * order. So the live stage, the virtual stage and two settings under one seed see the same arrivals and the same work.
 *
 * <p>For one stream and key {@code a}, the 64 bits over {@code b} are those of the SplitMix64 generator of Steele, Lea
 * and Flood, "Fast splittable pseudorandom number generators" (OOPSLA 2014): a Weyl sequence with the golden-ratio
 * step, put through a finaliser that changes about half of the bits for any changed bit. The finaliser is the one of
 * that paper (David Stafford's variant 13). The start of the sequence is itself hashed the same way from seed, stream
 * and {@code a}.
 *
 * <p>Immutable, allocates nothing per draw, any thread. Logarithms, roots and cosines are those of {@link StrictMath},
 * so that draws agree to the last bit on every machine.
 */
public final class Chance {

    /** 2^64 over the golden ratio, odd. */
    private static final long STEP = 0x9E3779B97F4A7C15L;

    private static final double TWO_TO_MINUS_53 = 0x1.0p-53;

    private final long seed;
    /** The hash of seed and stream, by number of the stream. */
    private final long[] ofStream;

    /** Draws of one seed; every value of {@code seed} is fine. */
    public Chance(long seed) {
        this.seed = seed;
        this.ofStream = new long[Stream.MOST + 1];
        for (Stream stream : Stream.values()) {
            ofStream[stream.number()] = mix(mix(seed) + stream.number() * STEP);
        }
    }

    public long seed() {
        return seed;
    }

    /**
     * 64 bits, each set with chance one half.
     *
     * @param a first key, usually the request number
     * @param b second key, usually the attempt
     */
    public long bits(Stream stream, long a, long b) {
        long ofFirst = mix(ofStream[stream.number()] + a * STEP);
        return mix(ofFirst + b * STEP);
    }

    /** Uniform on [0, 1), a multiple of 2^-53. */
    public double unit(Stream stream, long a, long b) {
        return unit(bits(stream, a, b));
    }

    /** Uniform on (0, 1], a multiple of 2^-53: safe to take the logarithm of. */
    public double positiveUnit(Stream stream, long a, long b) {
        return positiveUnit(bits(stream, a, b));
    }

    /** Exponential with mean 1, by inversion; 0 or above and below 36.8. */
    public double exponential(Stream stream, long a, long b) {
        return -StrictMath.log(positiveUnit(bits(stream, a, b)));
    }

    /**
     * Normal with mean 0 and variance 1, at most 8.6 away from 0. The cosine half of Box and Muller, "A note on the
     * generation of random normal deviates" (1958); its second uniform is one step further along the sequence of the
     * first, hashed once more.
     */
    public double normal(Stream stream, long a, long b) {
        long first = bits(stream, a, b);
        long second = mix(first + STEP);
        return StrictMath.sqrt(-2 * StrictMath.log(positiveUnit(first)))
                * StrictMath.cos(2 * StrictMath.PI * unit(second));
    }

    private static double unit(long bits) {
        return (bits >>> 11) * TWO_TO_MINUS_53;
    }

    private static double positiveUnit(long bits) {
        return ((bits >>> 11) + 1) * TWO_TO_MINUS_53;
    }

    private static long mix(long z) {
        z = (z ^ (z >>> 30)) * 0xBF58476D1CE4E5B9L;
        z = (z ^ (z >>> 27)) * 0x94D049BB133111EBL;
        return z ^ (z >>> 31);
    }
}
