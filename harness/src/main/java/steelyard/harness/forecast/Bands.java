package steelyard.harness.forecast;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import org.HdrHistogram.Histogram;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.Standing;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Slice;

/**
 * What a series looks like over time: slice by slice, where each column lies over plays.
 *
 * <p>Every value is kept, as a float: an exact quantile of some hundred plays takes no more room than a sketch of useful
 * precision would, slice by slice, and does not depend on the order in which plays were added. So memory grows with
 * slices times columns times plays, and is bounded: when it would pass {@value #MOST_VALUES} values, the bands are
 * those of the first plays alone, and say so.
 *
 * <p>{@link #slicesOf} may be called by any thread; everything else by one.
 */
public final class Bands {
    /** Of four bytes each. The same on every machine, since the files of a forecast are. */
    static final long MOST_VALUES = 32_000_000;

    private static final int STANDINGS = Standing.values().length;

    private final Cast cast;
    private final BandColumns columns;
    private final int slices;
    private final int most;
    private final List<float[] @Nullable []> plays = new ArrayList<>();
    private final long[][] standing;
    private final List<@Nullable Histogram> seconds = new ArrayList<>();
    private final Changes changes = new Changes();
    private List<PlaySlices.Applied> cues = List.of();

    /** Bands for the plays of a series that are about to be played. */
    public Bands(Series series) {
        cast = new Cast(series.drill());
        columns = new BandColumns(cast);
        slices = (int) ((series.drill().lastsNanos() + Slice.NANOS - 1) / Slice.NANOS);
        most = (int) Math.max(1, Math.min(series.plays(), MOST_VALUES / ((long) slices * columns.count())));
        standing = new long[columns.groups().size()][slices * STANDINGS];
    }

    /** Where to put the slices of a play; null for plays that are beyond what is kept. */
    @Nullable
    PlaySlices slicesOf(int play) {
        return play < most ? new PlaySlices(cast, columns, slices) : null;
    }

    /** Takes a play that has ended; plays come in order. */
    void add(PlaySlices play) {
        float[][] kept = new float[columns.count()][];
        for (int column = 0; column < kept.length; column++) {
            kept[column] = play.column(column);
        }
        if (plays.isEmpty()) {
            cues = play.cues();
        }
        plays.add(kept);
        for (int group = 0; group < standing.length; group++) {
            int[] own = play.standing(group);
            for (int at = 0; at < own.length; at++) {
                standing[group][at] += own[at];
            }
        }
        play.seconds().forEach(this::add);
        changes.add(play.changes());
    }

    private void add(PlaySlices.Second second) {
        while (seconds.size() <= second.number()) {
            seconds.add(null);
        }
        Histogram all = seconds.get(second.number());
        if (all == null) {
            all = new Histogram(1_000, 1_000_000_000L, 3);
            all.setAutoResize(true);
            seconds.set(second.number(), all);
        }
        for (int at = 0; at < second.nanos().length; at++) {
            all.recordValueWithCount(second.nanos()[at], second.counts()[at]);
        }
    }

    /** Of how many plays the bands are: those of the lowest numbers. */
    public int plays() {
        return plays.size();
    }

    int slices() {
        return slices;
    }

    Cast cast() {
        return cast;
    }

    List<Group> groups() {
        return columns.groups();
    }

    /** Whether each group is one backend. */
    boolean alone() {
        return cast.backends().size() <= Group.MOST_ALONE;
    }

    /** The cues, which are applied when they are due and so are those of every play. */
    List<PlaySlices.Applied> cues() {
        return cues;
    }

    Changes changes() {
        return changes;
    }

    /** Latencies of good answers of all plays, by the second in which they were due; null for a second without. */
    List<@Nullable Histogram> seconds() {
        return seconds;
    }

    /** The bands of a column of requests, by its place in {@link BandColumns#ofRequests}. */
    Band ofRequests(int column) {
        return band((play, slice) -> value(play, column, slice));
    }

    /** The bands of a column of a group, by its place in {@link BandColumns#OF_GROUP}. */
    Band ofGroup(int group, int column) {
        int place = columns.ofGroup(group, column);
        return band((play, slice) -> value(play, place, slice));
    }

    /** The names of the columns that only some stages have. */
    List<String> extras() {
        return columns.extras();
    }

    /** The bands of one of them, by its place in {@link #extras}. */
    Band ofExtra(int extra) {
        int place = columns.ofExtra(extra);
        return band((play, slice) -> value(play, place, slice));
    }

    /** The bands of the share that a group had of its pool's attempts; a slice without attempts has none. */
    Band share(int group) {
        String pool = groups().get(group).pool();
        int own = columns.ofGroup(group, BandColumns.PICKED);
        int[] all = new int[groups().size()];
        int size = 0;
        for (int other = 0; other < all.length; other++) {
            if (groups().get(other).pool().equals(pool)) {
                all[size++] = columns.ofGroup(other, BandColumns.PICKED);
            }
        }
        int[] ofPool = Arrays.copyOf(all, size);
        return band((play, slice) -> {
            double sum = 0;
            for (int column : ofPool) {
                sum += value(play, column, slice);
            }
            return value(play, own, slice) / sum;
        });
    }

    /** The standing that most plays (and, in a group, most members) had at the end of a slice; null without a play. */
    @Nullable
    Standing standing(int group, int slice) {
        Standing common = null;
        long most = 0;
        for (Standing each : Standing.values()) {
            long count = standing[group][slice * STANDINGS + each.ordinal()];
            if (count > most) {
                most = count;
                common = each;
            }
        }
        return common;
    }

    /** In what share of plays, and in a group of members, it was that one. */
    double standingShare(int group, int slice) {
        long most = 0;
        long sum = 0;
        for (int each = 0; each < STANDINGS; each++) {
            long count = standing[group][slice * STANDINGS + each];
            most = Math.max(most, count);
            sum += count;
        }
        return (double) most / sum;
    }

    private double value(int play, int column, int slice) {
        float[] values = plays.get(play)[column];
        return values == null ? 0 : values[slice];
    }

    private Band band(Values values) {
        Band band = new Band(slices);
        double[] known = new double[plays.size()];
        for (int slice = 0; slice < slices; slice++) {
            int size = 0;
            for (int play = 0; play < known.length; play++) {
                double value = values.at(play, slice);
                if (!Double.isNaN(value)) {
                    known[size++] = value;
                }
            }
            band.put(slice, known, size);
        }
        return band;
    }

    private interface Values {
        double at(int play, int slice);
    }
}
