package steelyard.harness.console;

import java.util.concurrent.Executors;
import java.util.concurrent.ScheduledExecutorService;
import java.util.concurrent.TimeUnit;

/** The thread of a view: shows again and again until it is stopped, and once more then. */
final class Ticker {
    private static final long STOP_SECONDS = 2;

    private final Runnable show;
    private final ScheduledExecutorService thread = Executors.newSingleThreadScheduledExecutor(work -> {
        Thread made = new Thread(work, "view");
        made.setDaemon(true);
        return made;
    });

    Ticker(Runnable show) {
        this.show = show;
    }

    void start(long everyMillis) {
        thread.scheduleWithFixedDelay(show, 0, everyMillis, TimeUnit.MILLISECONDS);
    }

    /** Ends the thread, whatever it waits for, at most after {@value #STOP_SECONDS} s; then shows once more. */
    void stop() {
        thread.shutdownNow();
        try {
            thread.awaitTermination(STOP_SECONDS, TimeUnit.SECONDS);
        } catch (InterruptedException stopped) {
            Thread.currentThread().interrupt();
        }
        show.run();
    }
}
