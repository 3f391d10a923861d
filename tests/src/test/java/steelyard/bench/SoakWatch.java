package steelyard.bench;

import io.netty.buffer.ByteBufAllocator;
import io.netty.buffer.ByteBufAllocatorMetricProvider;
import java.lang.management.ManagementFactory;
import java.lang.management.MemoryPoolMXBean;
import java.lang.management.MemoryType;
import java.lang.management.MemoryUsage;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import steelyard.accounting.OpenSockets;

/**
 * Collects everything every so often and notes what lives on: once before the play, then from a thread of its own.
 *
 * <p>A full collection stops the process for some tens of milliseconds; the generator is late for that long, which is
 * one request in a thousand.
 */
final class SoakWatch {
    private static final double MEBI = 1 << 20;

    private final long everyMillis;
    private final SoakCounts counts;
    private final Thread thread = new Thread(this::run, "soak-watch");
    private final long begunNanos = System.nanoTime();
    private final List<Reading> readings = new ArrayList<>();

    /** What lives at a time. */
    private record Reading(double seconds, double heapBytes) {}

    private SoakWatch(long everyMillis, SoakCounts counts) {
        this.everyMillis = everyMillis;
        this.counts = counts;
        thread.setDaemon(true);
    }

    static SoakWatch start(long everyMillis, SoakCounts counts) {
        say(
                "%7s %10s %9s %6s %10s %12s %8s %8s",
                "s", "requests", "failed", "cues", "heap MiB", "buffers MiB", "sockets", "threads");
        SoakWatch watch = new SoakWatch(everyMillis, counts);
        watch.thread.start();
        return watch;
    }

    private void run() {
        try {
            while (true) {
                TimeUnit.MILLISECONDS.sleep(everyMillis);
                read();
            }
        } catch (InterruptedException over) {
            Thread.currentThread().interrupt();
        }
    }

    private synchronized void read() {
        Reading reading = new Reading((System.nanoTime() - begunNanos) / 1e9, liveBytes());
        readings.add(reading);
        say(
                "%7.0f %10d %9d %6d %10.2f %12.2f %8d %8d",
                reading.seconds,
                counts.offered(),
                counts.failed(),
                counts.cues(),
                reading.heapBytes / MEBI,
                bufferBytes() / MEBI,
                OpenSockets.count(),
                ManagementFactory.getThreadMXBean().getThreadCount());
    }

    /**
     * By what factor the living heap grew over the second half of the play, by a straight line through its readings;
     * 1 when there are fewer than two.
     */
    synchronized double growth() {
        List<Reading> half = readings.subList(readings.size() / 2, readings.size());
        if (half.size() < 2) {
            return 1;
        }
        double meanSeconds =
                half.stream().mapToDouble(Reading::seconds).average().orElseThrow();
        double meanBytes =
                half.stream().mapToDouble(Reading::heapBytes).average().orElseThrow();
        double products = 0;
        double squares = 0;
        for (Reading each : half) {
            products += (each.seconds - meanSeconds) * (each.heapBytes - meanBytes);
            squares += (each.seconds - meanSeconds) * (each.seconds - meanSeconds);
        }
        double slope = products / squares;
        double first = meanBytes + slope * (half.get(0).seconds - meanSeconds);
        double last = meanBytes + slope * (half.get(half.size() - 1).seconds - meanSeconds);
        return last / first;
    }

    /** The heap right after a full collection, whatever was allocated since. */
    private static long liveBytes() {
        System.gc();
        long bytes = 0;
        for (MemoryPoolMXBean pool : ManagementFactory.getMemoryPoolMXBeans()) {
            MemoryUsage left = pool.getType() == MemoryType.HEAP ? pool.getCollectionUsage() : null;
            bytes += left == null ? 0 : left.getUsed();
        }
        return bytes;
    }

    private static long bufferBytes() {
        return ByteBufAllocator.DEFAULT instanceof ByteBufAllocatorMetricProvider provider
                ? provider.metric().usedDirectMemory()
                : 0;
    }

    private static void say(String format, Object... values) {
        Forwarding.say(format, values);
    }

    /** No more readings. */
    void close() throws InterruptedException {
        thread.interrupt();
        thread.join();
    }
}
