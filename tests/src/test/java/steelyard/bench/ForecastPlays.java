package steelyard.bench;

import com.sun.management.ThreadMXBean;
import java.lang.management.ManagementFactory;
import java.util.ArrayDeque;
import java.util.function.LongSupplier;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.SliceBook;
import steelyard.harness.record.Tee;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.virtual.Transport;
import steelyard.harness.stage.virtual.VirtualStage;

/** Plays a drill in virtual time over and over, added up in slices, and clocks the playing thread. */
final class ForecastPlays {
    private static final ThreadMXBean THREADS = (ThreadMXBean) ManagementFactory.getThreadMXBean();

    private final Drill drill;
    private final boolean judged;
    private long seed;

    /** @param judged whether the judge looks on; otherwise slices are all that is added up */
    ForecastPlays(Drill drill, boolean judged) {
        this.drill = drill;
        this.judged = judged;
    }

    /**
     * What was clocked.
     *
     * @param nanos of processor time of the playing thread
     * @param bytes that it allocated, plays made ready included
     */
    record Clocked(long requests, long nanos, long bytes) {
        double bytesEach() {
            return (double) bytes / requests;
        }

        double perSecond() {
            return requests * 1e9 / nanos;
        }

        double nanosEach() {
            return (double) nanos / requests;
        }
    }

    static Drill read(String text) {
        Parsed<Drill> parsed = DrillReader.read("drill", text);
        return parsed.value().orElseThrow(() -> new IllegalStateException(String.valueOf(parsed.problems())));
    }

    /** Plays until so many requests have ended. */
    Clocked play(long leastRequests) {
        return clock(() -> {
            long requests = 0;
            while (requests < leastRequests) {
                requests += playOnce();
            }
            return requests;
        });
    }

    /** Clocks work that answers how many requests it was. */
    static Clocked clock(LongSupplier work) {
        long bytes = THREADS.getCurrentThreadAllocatedBytes();
        long begun = THREADS.getCurrentThreadCpuTime();
        long requests = work.getAsLong();
        long nanos = THREADS.getCurrentThreadCpuTime() - begun;
        return new Clocked(requests, nanos, THREADS.getCurrentThreadAllocatedBytes() - bytes);
    }

    /** The next seed, played whole. Returns its requests. */
    private long playOnce() {
        seed++;
        Cast cast = new Cast(drill);
        long[] requests = new long[1];
        SliceBook book = new SliceBook(cast, slice -> requests[0] += slice.offered());
        if (!judged) {
            play(book);
        } else {
            Judge judge = new Judge(drill, cast);
            play(new Tee(judge, book));
            if (!judge.verdict().fit()) {
                throw new IllegalStateException(judge.verdict().text());
            }
        }
        return requests[0];
    }

    private void play(PlayListener listener) {
        try (VirtualStage stage = new VirtualStage(drill, seed, Transport.USUAL)) {
            stage.open(listener);
            stage.play(new Conductor(drill, new Chance(seed), new ArrayDeque<>()));
        } catch (CannotPlay e) {
            throw new IllegalStateException(e);
        }
    }
}
