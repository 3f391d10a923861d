package steelyard.harness.forecast;

import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.Set;
import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import java.util.concurrent.atomic.AtomicInteger;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Drill;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Tee;
import steelyard.harness.record.Verdict;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.virtual.Transport;
import steelyard.harness.stage.virtual.VirtualStage;

/**
 * Plays series in virtual time on a number of threads. What comes out depends on the series alone: plays share nothing
 * and are handed on in the order of their seeds.
 *
 * <p>One thread calls {@link #play}, for one series after the other; {@link #cancel} may come from any.
 */
public final class Plays implements AutoCloseable {
    private final ExecutorService threads;
    private final Set<VirtualStage> playing = ConcurrentHashMap.newKeySet();
    private volatile boolean cancelled;

    /** @param threads how many plays may go on at once, at least 1 */
    public Plays(int threads) {
        AtomicInteger number = new AtomicInteger();
        this.threads = Executors.newFixedThreadPool(threads, work -> {
            Thread made = new Thread(work, "play-" + number.incrementAndGet());
            made.setDaemon(true);
            return made;
        });
    }

    /**
     * Whether a drill can be played in virtual time.
     *
     * @throws CannotPlay when not, with one line that says why and what to do
     */
    public static void check(Drill drill) throws CannotPlay {
        try (VirtualStage stage = new VirtualStage(drill, 0, Transport.USUAL)) {
            stage.open(new PlayListener() {});
        }
    }

    /**
     * Plays a series; blocks until it has been played or cancelled.
     *
     * @param each is told of every play in the order of the seeds, by the calling thread
     * @return what was played; after a cancel the first plays of the series, none left out
     * @throws CannotPlay when the drill cannot be played in virtual time
     */
    public Played play(Series series, Consumer<Play> each) throws CannotPlay {
        return new Round(series, null, each).play();
    }

    /** The same; the bands, which must be of the same series, are given the slices of the plays too. */
    public Played play(Series series, Bands bands, Consumer<Play> each) throws CannotPlay {
        return new Round(series, bands, each).play();
    }

    /** Ends what is being played, and everything that is asked for later, soon. Any thread. */
    public void cancel() {
        cancelled = true;
        playing.forEach(VirtualStage::interrupt);
    }

    public boolean cancelled() {
        return cancelled;
    }

    @Override
    public void close() {
        cancel();
        threads.shutdownNow();
    }

    /** One call of {@link #play}. */
    private final class Round {
        private final Series series;
        private final @Nullable Bands bands;
        private final Consumer<Play> each;
        private List<Figure> figures = List.of();
        private int expectations;

        Round(Series series, @Nullable Bands bands, Consumer<Play> each) {
            this.series = series;
            this.bands = bands;
            this.each = each;
        }

        Played play() throws CannotPlay {
            Deque<Future<@Nullable Done>> coming = new ArrayDeque<>();
            for (int number = 0; number < series.plays(); number++) {
                int play = number;
                coming.add(threads.submit(() -> playOne(play)));
            }
            List<Play> plays = new ArrayList<>();
            try {
                // Taken out one by one, so that nothing holds what has been handed on.
                for (Future<@Nullable Done> next = coming.poll(); next != null; next = coming.poll()) {
                    Done done = next.get();
                    if (done == null) {
                        break;
                    }
                    plays.add(take(done));
                }
            } catch (ExecutionException broken) {
                cancel();
                throw failure(broken);
            } catch (InterruptedException stopped) {
                cancel();
                Thread.currentThread().interrupt();
            }
            return new Played(series, figures, expectations, plays);
        }

        private Play take(Done done) {
            if (figures.isEmpty()) {
                figures = Play.findings(done.verdict).stream().map(Figure::of).toList();
                expectations = done.verdict.expectations().size();
            }
            if (bands != null && done.slices != null) {
                bands.add(done.slices);
            }
            Play play = Play.of(done.number, series.seedOf(done.number), figures, done.verdict);
            each.accept(play);
            return play;
        }

        /** Null when it was cancelled; a play that ended while the cancel came may be among the lost. */
        private @Nullable Done playOne(int number) throws CannotPlay {
            if (cancelled) {
                return null;
            }
            Drill drill = series.drill();
            long seed = series.seedOf(number);
            Judge judge = new Judge(drill, new Cast(drill));
            PlaySlices slices = bands == null ? null : bands.slicesOf(number);
            PlayListener listener = slices == null ? judge : new Tee(judge, slices);
            try (VirtualStage stage = new VirtualStage(drill, seed, series.transport())) {
                playing.add(stage);
                if (cancelled) {
                    stage.interrupt();
                }
                stage.open(listener);
                stage.play(new Conductor(drill, new Chance(seed), new ArrayDeque<>()));
                playing.remove(stage);
            }
            return cancelled ? null : new Done(number, judge.verdict(), slices);
        }
    }

    private static CannotPlay failure(ExecutionException broken) {
        Throwable cause = broken.getCause();
        if (cause instanceof CannotPlay cannot) {
            return cannot;
        }
        if (cause instanceof Error error) {
            throw error;
        }
        throw new IllegalStateException("a play broke off: " + cause, cause);
    }

    private record Done(
            int number, Verdict verdict, @Nullable PlaySlices slices) {}
}
