package steelyard.harness.stage.live;

import java.util.Arrays;
import java.util.PriorityQueue;
import java.util.Queue;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.concurrent.atomic.AtomicLong;
import java.util.concurrent.locks.LockSupport;
import java.util.function.Consumer;
import java.util.function.LongSupplier;
import org.jspecify.annotations.Nullable;
import steelyard.harness.record.PlayListener;

/**
 * One account of a play, in order of time, out of what several threads tell.
 *
 * <p>Problem: generator, balancer and backends tell what they saw from threads of their own; a listener wants one thread
 * and times that never go back. Choice: entries are held back for a quarter of a second, sorted by time, then source,
 * then the order in which they were told, and passed on by one thread. The hold is counted in wake-ups of that thread,
 * not in time: when the machine stops the whole process for a second, the hold stops with it, and those who were about
 * to tell something still have their quarter second. Cost: a listener lags by that much. An entry that comes later still
 * is passed on with the time of its predecessor, and counted.
 */
final class Account {
    /** Where an entry comes from; the order of entries of one instant. */
    enum Source {
        CUES,
        TRAFFIC,
        BALANCER,
        BACKENDS,
        SAMPLES
    }

    /** What is told to the listener, at a play time that never goes back. */
    @FunctionalInterface
    interface Telling {
        void tell(PlayListener listener, long atNanos);
    }

    private static final long ROUND_NANOS = 25_000_000;
    private static final int HELD_ROUNDS = 10;

    private final PlayListener listener;
    private final LongSupplier playNow;
    private final Consumer<RuntimeException> onFailure;
    private final Queue<Entry> told = new ConcurrentLinkedQueue<>();
    private final AtomicLong order = new AtomicLong();
    private final PriorityQueue<Entry> sorted = new PriorityQueue<>();
    private final long[] readings = new long[HELD_ROUNDS];
    private final Thread teller = new Thread(this::run, "account");
    private volatile boolean finishing;
    private volatile long late;
    private volatile long toldUpToNanos = Long.MAX_VALUE;
    private volatile @Nullable RuntimeException failure;
    private long latestNanos = Long.MIN_VALUE;

    /** @param onFailure told once, by the account's thread, when the listener throws; nothing more is passed on then */
    Account(PlayListener listener, LongSupplier playNow, Consumer<RuntimeException> onFailure) {
        this.listener = listener;
        this.playNow = playNow;
        this.onFailure = onFailure;
        teller.setDaemon(true);
    }

    void start() {
        Arrays.fill(readings, Long.MIN_VALUE);
        teller.start();
    }

    /** Tells something. Entries of one source and one instant keep the order of these calls. Any thread. */
    void tell(Source source, long atNanos, Telling telling) {
        told.add(new Entry(atNanos, source, order.getAndIncrement(), telling));
    }

    /**
     * Nothing after {@code nanos} is passed on before this is called again: the generator, which tells of requests by
     * their due time, has told of all that were due up to then, but may be behind with the rest.
     */
    void holdAfter(long nanos) {
        toldUpToNanos = nanos;
    }

    /** Entries that came too late for their place, so far. */
    long late() {
        return late;
    }

    /**
     * Passes on all that was told, then the end of the play, and stops. Nothing may be told any more that should be heard.
     *
     * @throws RuntimeException what the listener threw, if it did
     */
    void finish(boolean complete) {
        finishing = true;
        LockSupport.unpark(teller);
        boolean interrupted = false;
        while (teller.isAlive()) {
            try {
                teller.join();
            } catch (InterruptedException stop) {
                interrupted = true;
            }
        }
        if (interrupted) {
            Thread.currentThread().interrupt();
        }
        pass(Long.MAX_VALUE);
        // Joined: from here on this thread is the only one that calls the listener.
        guarded(() -> listener.ended(Math.max(latestNanos, playNow.getAsLong()), complete));
        RuntimeException thrown = failure;
        if (thrown != null) {
            throw thrown;
        }
    }

    private void run() {
        int round = 0;
        while (!finishing) {
            LockSupport.parkNanos(ROUND_NANOS);
            pass(Math.min(readings[round], toldUpToNanos));
            readings[round] = playNow.getAsLong();
            round = (round + 1) % HELD_ROUNDS;
        }
    }

    private void pass(long upToNanos) {
        for (Entry entry = told.poll(); entry != null; entry = told.poll()) {
            sorted.add(entry);
        }
        for (Entry entry = sorted.peek(); entry != null && entry.atNanos <= upToNanos; entry = sorted.peek()) {
            sorted.remove();
            pass(entry);
        }
    }

    private void pass(Entry entry) {
        if (entry.atNanos < latestNanos) {
            late++;
        }
        latestNanos = Math.max(latestNanos, entry.atNanos);
        guarded(() -> entry.telling.tell(listener, latestNanos));
    }

    private void guarded(Runnable call) {
        if (failure != null) {
            return;
        }
        try {
            call.run();
        } catch (RuntimeException thrown) {
            failure = thrown;
            onFailure.accept(thrown);
        }
    }

    private record Entry(long atNanos, Source source, long order, Telling telling) implements Comparable<Entry> {
        @Override
        public int compareTo(Entry other) {
            int byTime = Long.compare(atNanos, other.atNanos);
            int bySource = byTime != 0 ? byTime : source.compareTo(other.source);
            return bySource != 0 ? bySource : Long.compare(order, other.order);
        }
    }
}
