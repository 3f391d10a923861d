package steelyard.harness.record;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.Standing;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;

/**
 * Running figures of a play for whoever watches it. Fed by the thread that tells the play; {@link #now} may be called
 * by any thread and gives the figures as they were at the end of the last slice, all of one instant.
 */
public final class PlayBoard implements PlayListener {
    private static final int SECOND = (int) (1_000_000_000L / Slice.NANOS);
    private static final Cause[] CAUSES = Cause.values();

    private final Cast cast;
    private final int backends;
    private final long[] failedBy = new long[CAUSES.length];
    /** Figures of the slices of the last second, slice by slice; one column more for the current one. */
    private final Ring offeredOf;

    private final Ring failedOf;
    private final Ring[] pickedOf;
    private long offered;
    private long good;
    private final Guidance guidance;
    private @Nullable Played lastCue;
    private volatile Figures now;

    public PlayBoard(Cast cast) {
        this.cast = cast;
        backends = cast.backends().size();
        guidance = new Guidance(backends);
        offeredOf = new Ring();
        failedOf = new Ring();
        pickedOf = new Ring[backends];
        Arrays.setAll(pickedOf, b -> new Ring());
        now = figures(0, new Sample(backends), false);
    }

    /** The latest figures; immutable. Any thread. */
    public Figures now() {
        return now;
    }

    @Override
    public void requestDue(long atNanos, long request, int traffic, int kind, int client) {
        offered++;
        offeredOf.current++;
    }

    @Override
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        if (cause == null) {
            good++;
        } else {
            failedBy[cause.ordinal()]++;
            failedOf.current++;
        }
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        pickedOf[backend].current++;
    }

    @Override
    public void loadRead(long atNanos, int backend, long number, int headroomMilli, boolean fresh) {
        guidance.take(backend, fresh);
    }

    @Override
    public void cueApplied(long atNanos, long dueNanos, Cue cue, By by) {
        lastCue = new Played(atNanos, cue, by);
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        offeredOf.turn();
        failedOf.turn();
        for (Ring each : pickedOf) {
            each.turn();
        }
        now = figures(atNanos, sample, false);
    }

    @Override
    public void ended(long atNanos, boolean complete) {
        Figures last = now;
        now = new Figures(
                atNanos,
                true,
                offered,
                good,
                failedBy(),
                last.offeredLastSecond(),
                last.failedLastSecond(),
                0,
                last.unread(),
                last.backends(),
                lastCue);
    }

    private Figures figures(long atNanos, Sample sample, boolean ended) {
        long[] pools = new long[cast.pools().size()];
        for (int b = 0; b < backends; b++) {
            pools[cast.poolOf(b)] += pickedOf[b].sum;
        }
        List<BackendFigures> each = new ArrayList<>(backends);
        for (int b = 0; b < backends; b++) {
            long pool = pools[cast.poolOf(b)];
            each.add(new BackendFigures(
                    cast.backends().get(b).name(),
                    cast.pools().get(cast.poolOf(b)).name(),
                    sample.standing[b],
                    sample.pickable[b],
                    sample.setWeight[b],
                    sample.effectiveWeight[b],
                    pool == 0 ? 0 : (double) pickedOf[b].sum / pool,
                    sample.entitledShare[b],
                    sample.inFlight[b],
                    sample.waiting[b]));
        }
        long waiting = IntStream.of(sample.waitingForBackend).sum();
        return new Figures(
                atNanos,
                ended,
                offered,
                good,
                failedBy(),
                offeredOf.sum,
                failedOf.sum,
                waiting,
                guidance.lost(),
                each,
                lastCue);
    }

    private Map<Cause, Long> failedBy() {
        Map<Cause, Long> counts = new EnumMap<>(Cause.class);
        for (Cause cause : CAUSES) {
            if (failedBy[cause.ordinal()] > 0) {
                counts.put(cause, failedBy[cause.ordinal()]);
            }
        }
        return counts;
    }

    /**
     * A play so far.
     *
     * @param failedBy causes that occurred, in the order of the causes
     * @param offeredLastSecond requests due in the last second; by when they failed for the failed ones
     * @param waiting in the balancer for a backend to be free
     * @param unread backends whose weights should go by load, and go by what was set for want of readings
     * @param backends in stage order
     * @param lastCue the last cue applied, or null
     */
    public record Figures(
            long atNanos,
            boolean ended,
            long offered,
            long good,
            Map<Cause, Long> failedBy,
            long offeredLastSecond,
            long failedLastSecond,
            long waiting,
            int unread,
            List<BackendFigures> backends,
            @Nullable Played lastCue) {

        public Figures {
            backends = List.copyOf(backends);
        }

        public long failed() {
            return failedBy.values().stream().mapToLong(Long::longValue).sum();
        }

        /** Requests due that have no end yet. */
        public long open() {
            return offered - good - failed();
        }
    }

    /**
     * A backend at the end of the last slice.
     *
     * @param pickable whether new work may be given to it, be it for want of anybody better
     * @param share of its pool's attempts over the last second, from 0 to 1
     */
    public record BackendFigures(
            String name,
            String pool,
            Standing standing,
            boolean pickable,
            int setWeight,
            double effectiveWeight,
            double share,
            double entitledShare,
            int inFlight,
            int waiting) {

        /** Whether it is picked from although its standing speaks against it: the last resort of its pool. */
        public boolean lastResort() {
            return pickable && !standing.pickable();
        }
    }

    /** A cue that was applied. */
    public record Played(long atNanos, Cue cue, By by) {}

    /** A count over the last ten slices. */
    private static final class Ring {
        private final long[] slices = new long[SECOND];
        private int next;
        private long sum;
        private long current;

        void turn() {
            sum += current - slices[next];
            slices[next] = current;
            next = (next + 1) % SECOND;
            current = 0;
        }
    }
}
