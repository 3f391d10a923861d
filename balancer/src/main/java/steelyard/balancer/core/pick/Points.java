package steelyard.balancer.core.pick;

/**
 * Sorted points on a ring, and where to look for the next one.
 *
 * <p>Points made by a good hash are spread evenly, so the ring is cut into as many equal stretches as there are points, and an
 * index says where each stretch begins: from there, the next point is one step away on average. A binary search would take 20
 * steps on a ring of a million, most of them to memory that nobody has looked at lately.
 *
 * <p>A point is one number, position above and member below, so that sorted numbers are a sorted ring.
 */
final class Points {
    private static final int MEMBER_BITS = 20;
    private static final int MEMBER = (1 << MEMBER_BITS) - 1;

    private final long[] sorted;
    private final int[] start;

    Points(long[] sorted) {
        this.sorted = sorted;
        start = new int[sorted.length];
        int stretch = 0;
        for (int i = 0; i < sorted.length; i++) {
            while (stretch <= stretch(sorted[i])) {
                start[stretch++] = i;
            }
        }
        while (stretch < sorted.length) {
            start[stretch++] = sorted.length;
        }
    }

    /** A point of a member where a hash stands on the ring, by its high bits; never below 0. */
    static long point(long hash, int member) {
        return hash >>> 1 >>> MEMBER_BITS << MEMBER_BITS | member;
    }

    static int member(long point) {
        return (int) point & MEMBER;
    }

    int count() {
        return sorted.length;
    }

    long at(int place) {
        return sorted[place];
    }

    /** The place of the first point at or after where a hash stands; {@link #count} if that is the ring's end. */
    int next(long hash) {
        if (sorted.length == 0) {
            return 0;
        }
        long point = point(hash, 0);
        int place = start[stretch(point)];
        while (place < sorted.length && sorted[place] < point) {
            place++;
        }
        return place;
    }

    private int stretch(long point) {
        return (int) Draw.below(sorted.length, point << 1);
    }
}
