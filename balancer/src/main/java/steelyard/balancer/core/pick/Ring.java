package steelyard.balancer.core.pick;

import java.util.Arrays;

/**
 * Points on a ring: a key belongs to the member of the next point, and passes on to the points behind it (Karger, Lehman,
 * Leighton, Panigrahy, Levine, Lewin, STOC 1997).
 *
 * <p>A member has so many points for each unit of its weight, rounded, at least one and at most {@link #MOST_POINTS}. They are
 * the first of an endless series that its name gives, so that a change of weight moves only keys that the member gains or
 * loses.
 *
 * <p>Who leaves keeps its points: a walk passes over them, which moves exactly the keys that it owned, and coming back costs
 * nothing. Only once walks have passed over as many points as there are is the ring copied without them; so that copy is paid
 * for. The points are sorted anew only after a change of weight, at the next walk: new ones are sorted and merged with
 * the rest. A walk begins with a binary search.
 *
 * <p>A point is one number, position above and member below, so that sorted numbers are a sorted ring.
 */
final class Ring implements KeyTable {
    static final int MOST_POINTS = 1 << 16;

    private static final int MEMBER_BITS = 20;
    private static final int MEMBER = (1 << MEMBER_BITS) - 1;

    private final long[] nameHash;
    private final int pointsPerUnit;
    private final int[] wanted;
    private final int[] placed;
    private final boolean[] in;

    private boolean changed;
    /** All points, of whoever is in or not. */
    private long[] points = {};
    /** The points that walks go over: all, or without those of members that are out. */
    private long[] walked = points;

    private long passedOver;
    private int at;
    private int left;

    /**
     * @param nameHash of each member
     * @param pointsPerUnit points for each unit of weight
     */
    Ring(long[] nameHash, int pointsPerUnit) {
        this.nameHash = nameHash;
        this.pointsPerUnit = pointsPerUnit;
        wanted = new int[nameHash.length];
        placed = new int[nameHash.length];
        in = new boolean[nameHash.length];
    }

    @Override
    public void enter(int member) {
        in[member] = true;
        walked = points;
    }

    @Override
    public void leave(int member) {
        in[member] = false;
    }

    @Override
    public void weigh(int member, long weightMilli) {
        long rounded = (weightMilli * pointsPerUnit + Picker.MILLI / 2) / Picker.MILLI;
        wanted[member] = weightMilli == 0 ? 0 : (int) Math.min(MOST_POINTS, Math.max(1, rounded));
        changed |= wanted[member] != placed[member];
    }

    @Override
    public int first(long key) {
        if (changed) {
            place();
        } else if (passedOver > walked.length) {
            walked = Arrays.stream(points).filter(point -> in[member(point)]).toArray();
            passedOver = 0;
        }
        // Members are never below 0, so the search meets no equal, and its answer is where the key would stand.
        int found = Arrays.binarySearch(walked, position(key) - 1);
        at = found < 0 ? -found - 1 : found + 1;
        left = walked.length;
        return next();
    }

    @Override
    public int next() {
        while (left > 0) {
            left--;
            at = at < walked.length ? at : 0;
            int member = member(walked[at++]);
            if (in[member]) {
                return member;
            }
            passedOver++;
        }
        return NOBODY;
    }

    /** Keeps the points of members whose number of points is right, and makes those of the others anew. */
    private void place() {
        long[] fresh = new long[Arrays.stream(wanted).sum()];
        int kept = 0;
        for (long point : points) {
            int member = member(point);
            if (wanted[member] == placed[member]) {
                fresh[kept++] = point;
            }
        }
        int size = kept;
        for (int member = 0; member < wanted.length; member++) {
            if (wanted[member] != placed[member]) {
                for (int i = 0; i < wanted[member]; i++) {
                    fresh[size++] = position(Keys.of(nameHash[member], i)) | member;
                }
                placed[member] = wanted[member];
            }
        }
        // Two sorted runs are what the library's sort merges in one pass.
        Arrays.sort(fresh, kept, size);
        Arrays.sort(fresh);
        points = fresh;
        walked = fresh;
        passedOver = 0;
        changed = false;
    }

    /** Where a hash stands on the ring: its high bits, above those of a member, and not below 0. */
    private static long position(long hash) {
        return hash >>> 1 >>> MEMBER_BITS << MEMBER_BITS;
    }

    private static int member(long point) {
        return (int) point & MEMBER;
    }
}
