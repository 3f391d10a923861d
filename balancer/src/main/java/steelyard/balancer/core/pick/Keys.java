package steelyard.balancer.core.pick;

/**
 * Keys as 64 bits, the same on every stage and machine.
 *
 * <p>FNV-1a over the UTF-16 units (Fowler, Noll, Vo; constants as in RFC 9923, from memory), put through the finaliser of
 * Steele, Lea and Flood (OOPSLA 2014, variant 13), since the plain sum leaves its high bits weak on short keys.
 */
public final class Keys {
    private static final long OFFSET = 0xCBF29CE484222325L;
    private static final long PRIME = 0x100000001B3L;

    private Keys() {}

    /** The key of a text; of an empty or missing one, that of the empty text. */
    public static long of(CharSequence text) {
        long hash = OFFSET;
        for (int i = 0; i < text.length(); i++) {
            hash = (hash ^ text.charAt(i)) * PRIME;
        }
        return mix(hash);
    }

    /** Another 64 bits for each number and key, unrelated to its neighbours'. */
    public static long of(long key, long number) {
        return mix(key ^ mix(number + 1));
    }

    /** Another 64 bits for each key. */
    static long of(long key) {
        return mix(key);
    }

    private static long mix(long z) {
        z = (z ^ (z >>> 30)) * 0xBF58476D1CE4E5B9L;
        z = (z ^ (z >>> 27)) * 0x94D049BB133111EBL;
        return z ^ (z >>> 31);
    }
}
