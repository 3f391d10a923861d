package steelyard.harness.record;

import java.util.ArrayDeque;
import java.util.Arrays;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.Standing;
import steelyard.drills.model.Cause;

/**
 * Adds a play up in slices of 100 ms and hands each out, in order, once nothing of it can change any more.
 *
 * <p>A request belongs to the slice of its due time, but a stage may tell of it a little later and its end comes later
 * still. So a slice waits until every request told in it, or within the grace of {@value #GRACE} slices behind it, has
 * ended. Request numbers follow the due times, which is enough to know in which slice a request was told without
 * keeping it: memory is bounded by the slices from the oldest open request to now, never by the length of the play. A
 * request that a stage tells of later than the grace is counted in the oldest slice still open.
 */
public final class SliceBook implements PlayListener {
    /** Lateness of the telling that costs nothing, in slices. */
    static final int GRACE = 3;

    private static final int MOST_SPARE = 64;

    /** A timer that fires that little before the end of a slice still closes it. */
    private static final long EARLY_NANOS = 1_000_000L;

    private final Consumer<Slice> receiver;
    private final int backends;
    private final int[] workers;
    private final int[] poolOfTraffic;
    private final int pools;
    private final boolean byPool;
    private final ArrayDeque<Slice> spare = new ArrayDeque<>();
    private final Sample last;
    private final long[] busyBefore;

    /** Stands where a slice was that has been handed out. */
    private final Slice released;

    private Slice[] ring = new Slice[64];
    private long base;
    private long next;
    private long sampledTo;
    private long lastSampleNanos;
    private long told;
    private long lastIndex = Long.MAX_VALUE;

    /** @param receiver gets each slice once, in order, and must not keep it */
    public SliceBook(Cast cast, Consumer<Slice> receiver) {
        this(cast, receiver, false);
    }

    /**
     * @param receiver gets each slice once, in order, and must not keep it
     * @param byPool whether slices keep latencies by pool too; they do so where there are several
     */
    SliceBook(Cast cast, Consumer<Slice> receiver, boolean byPool) {
        this.receiver = receiver;
        this.byPool = byPool && cast.pools().size() > 1;
        backends = cast.backends().size();
        workers = cast.backends().stream().mapToInt(b -> b.serves().workers()).toArray();
        pools = cast.pools().size();
        poolOfTraffic = cast.poolsOfTraffic();
        last = new Sample(backends, pools);
        busyBefore = new long[backends];
        released = new Slice(backends, pools, false);
        for (int b = 0; b < backends; b++) {
            last.standing[b] = cast.backends().get(b).startsDown() ? Standing.DOWN : Standing.UP;
        }
    }

    @Override
    public void requestDue(long atNanos, long request, int traffic, int kind, int client) {
        at(Math.max(base, atNanos / Slice.NANOS));
        // In the newest slice, whatever the stamp says: the numbers of a slice are then one stretch.
        ring[place(next - 1)].open++;
        told++;
    }

    @Override
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        ended(atNanos, atNanos, request, dueNanos, traffic, cause);
    }

    @Override
    public void tunnelEnded(
            long atNanos,
            long openedNanos,
            long request,
            long dueNanos,
            int traffic,
            int kind,
            @Nullable Cause cause,
            int status) {
        ended(atNanos, openedNanos, request, dueNanos, traffic, cause);
    }

    private void ended(
            long atNanos, long answeredNanos, long request, long dueNanos, int traffic, @Nullable Cause cause) {
        at(atNanos / Slice.NANOS);
        Slice slice = at(Math.max(base, dueNanos / Slice.NANOS));
        int pool = poolOfTraffic[traffic];
        slice.offeredTo[pool]++;
        slice.failedOf[pool] += cause == null ? 0 : 1;
        if (cause == null) {
            slice.ok++;
            long tookNanos = Math.max(0, answeredNanos - dueNanos);
            slice.latency.recordValue(tookNanos);
            if (byPool) {
                slice.latencyOf[pool].recordValue(tookNanos);
            }
        } else {
            slice.failedBy[cause.ordinal()]++;
        }
        Slice toldIn = slice;
        while (toldIn.index + 1 < next && at(toldIn.index + 1).firstTold <= request) {
            toldIn = at(toldIn.index + 1);
        }
        toldIn.open--;
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        Slice slice = at(atNanos / Slice.NANOS);
        slice.picked[backend]++;
        if (attempt > 1) {
            slice.retries++;
        }
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        long slices = (atNanos + EARLY_NANOS) / Slice.NANOS;
        if (slices <= sampledTo) {
            return;
        }
        long spanNanos = atNanos - lastSampleNanos;
        for (long index = sampledTo; index < slices; index++) {
            Slice slice = at(index);
            for (int b = 0; b < backends; b++) {
                double busy = (double) (sample.busyNanos[b] - busyBefore[b]) / spanNanos / workers[b];
                slice.utilisation[b] = Math.min(1, Math.max(0, busy));
            }
            keep(slice, sample);
        }
        System.arraycopy(sample.busyNanos, 0, busyBefore, 0, backends);
        copy(sample, last);
        lastSampleNanos = atNanos;
        sampledTo = slices;
        handOut(false);
    }

    /** Slices that begin after it are not handed out: nothing is sent in them. */
    @Override
    public void interrupted(long atNanos) {
        lastIndex = atNanos / Slice.NANOS;
    }

    @Override
    public void ended(long atNanos, boolean complete) {
        for (long index = Math.max(sampledTo, base); index < next; index++) {
            keep(at(index), last);
        }
        handOut(true);
    }

    private void handOut(boolean all) {
        while (base < next && (all || settled())) {
            Slice slice = ring[place(base)];
            if (base <= lastIndex) {
                receiver.accept(slice);
            }
            release(slice);
            base++;
        }
    }

    /** Slices of a long lag go: a machine that was stopped for a while would carry them to the end of the play. */
    private void release(Slice slice) {
        if (spare.size() < MOST_SPARE) {
            spare.add(slice);
        }
        ring[place(slice.index)] = released;
    }

    private boolean settled() {
        if (base + GRACE >= sampledTo) {
            return false;
        }
        for (long index = base; index <= base + GRACE; index++) {
            if (ring[place(index)].open > 0) {
                return false;
            }
        }
        return true;
    }

    private void keep(Slice slice, Sample sample) {
        System.arraycopy(sample.inFlight, 0, slice.inFlight, 0, backends);
        System.arraycopy(sample.standing, 0, slice.standing, 0, backends);
        System.arraycopy(sample.effectiveWeight, 0, slice.weight, 0, backends);
        System.arraycopy(sample.entitledShare, 0, slice.entitled, 0, backends);
        System.arraycopy(sample.headroom, 0, slice.headroom, 0, backends);
        System.arraycopy(sample.waiting, 0, slice.waiting, 0, backends);
        System.arraycopy(sample.waitingForBackend, 0, slice.waitingForBackend, 0, pools);
    }

    private void copy(Sample from, Sample to) {
        int n = from.inFlight.length;
        System.arraycopy(from.inFlight, 0, to.inFlight, 0, n);
        System.arraycopy(from.standing, 0, to.standing, 0, n);
        System.arraycopy(from.effectiveWeight, 0, to.effectiveWeight, 0, n);
        System.arraycopy(from.entitledShare, 0, to.entitledShare, 0, n);
        System.arraycopy(from.headroom, 0, to.headroom, 0, n);
        System.arraycopy(from.waiting, 0, to.waiting, 0, n);
        System.arraycopy(from.waitingForBackend, 0, to.waitingForBackend, 0, pools);
    }

    /** The open slice of that index; those up to it are opened. Not below {@code base}. */
    private Slice at(long index) {
        while (next <= index) {
            if (next - base == ring.length) {
                grow();
            }
            Slice slice = spare.poll();
            if (slice == null) {
                slice = new Slice(backends, pools, byPool);
            }
            slice.reset(next, told);
            ring[place(next)] = slice;
            next++;
        }
        return ring[place(index)];
    }

    private int place(long index) {
        return (int) (index & (ring.length - 1));
    }

    private void grow() {
        Slice[] old = ring;
        ring = Arrays.copyOf(old, old.length * 2);
        for (long index = base; index < next; index++) {
            ring[place(index)] = old[(int) (index & (old.length - 1))];
        }
    }
}
