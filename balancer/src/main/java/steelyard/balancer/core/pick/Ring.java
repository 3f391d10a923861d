package steelyard.balancer.core.pick;

import java.util.Arrays;
import java.util.stream.IntStream;

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
 * for. Only a change of weight makes points anew, at the next walk and for that member: they are sorted and merged with the
 * rest.
 */
final class Ring implements KeyTable {
    static final int MOST_POINTS = 1 << 16;

    private final long[] nameHash;
    private final int pointsPerUnit;
    private final int[] wanted;
    private final int[] placed;
    private final boolean[] in;

    private boolean changed;
    /** All points, of whoever is in or not. */
    private Points points = new Points(new long[0]);
    /** The points that walks go over: all, or without those of members that are out. */
    private Points walked = points;

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
        } else if (passedOver > walked.count()) {
            walked = pointsOfThoseIn();
            passedOver = 0;
        }
        at = walked.next(key);
        left = walked.count();
        return next();
    }

    @Override
    public int next() {
        while (left > 0) {
            left--;
            at = at < walked.count() ? at : 0;
            int member = Points.member(walked.at(at++));
            if (in[member]) {
                return member;
            }
            passedOver++;
        }
        return NOBODY;
    }

    private Points pointsOfThoseIn() {
        return new Points(IntStream.range(0, points.count())
                .mapToLong(points::at)
                .filter(point -> in[Points.member(point)])
                .toArray());
    }

    /** Keeps the points of members whose number of points is right, and makes those of the others anew. */
    private void place() {
        long[] fresh = new long[Arrays.stream(wanted).sum()];
        int kept = 0;
        for (int i = 0; i < points.count(); i++) {
            int member = Points.member(points.at(i));
            if (wanted[member] == placed[member]) {
                fresh[kept++] = points.at(i);
            }
        }
        int size = kept;
        for (int member = 0; member < wanted.length; member++) {
            if (wanted[member] != placed[member]) {
                for (int i = 0; i < wanted[member]; i++) {
                    fresh[size++] = Points.point(Keys.of(nameHash[member], i), member);
                }
                placed[member] = wanted[member];
            }
        }
        // Two sorted runs are what the library's sort merges in one pass.
        Arrays.sort(fresh, kept, size);
        Arrays.sort(fresh);
        points = new Points(fresh);
        walked = points;
        passedOver = 0;
        changed = false;
    }
}
