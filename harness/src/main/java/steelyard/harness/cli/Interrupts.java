package steelyard.harness.cli;

import java.io.PrintWriter;
import java.nio.file.Path;
import java.util.concurrent.atomic.AtomicInteger;
import org.jline.utils.Signals;

/**
 * Ctrl-C and its relatives: the first asks for a clean end, the second stops the process at once.
 *
 * <p>Any thread may call any method. What is run for a signal runs on the JVM's signal thread.
 */
final class Interrupts {
    private static final Runnable NOTHING = () -> {};

    private final AtomicInteger status = new AtomicInteger();
    private volatile Runnable first = NOTHING;
    private volatile Runnable second = NOTHING;

    private Interrupts() {}

    /** Begins to listen; for the rest of the process. */
    static Interrupts listen() {
        Interrupts interrupts = new Interrupts();
        interrupts.on("INT", 130);
        interrupts.on("TERM", 143);
        interrupts.on("HUP", 129);
        return interrupts;
    }

    private void on(String signal, int exitStatus) {
        Signals.register(signal, () -> came(exitStatus));
    }

    private void came(int exitStatus) {
        if (status.compareAndSet(0, exitStatus)) {
            first.run();
        } else {
            second.run();
            Runtime.getRuntime().halt(exitStatus);
        }
    }

    /** Has that done at the first signal; at once when it has come already. */
    void atFirst(Runnable what) {
        first = what;
        if (came()) {
            what.run();
        }
    }

    /** Has a view closed before the process is stopped by a second signal, and says where what was written stands. */
    void atSecond(Runnable close, Path folder, PrintWriter err) {
        second = () -> {
            close.run();
            err.println("steelyard: stopped; what was written stands in " + folder);
            err.flush();
        };
    }

    boolean came() {
        return status.get() != 0;
    }

    /** What the process ends with after a signal, 128 and its number; 0 when none came. */
    int status() {
        return status.get();
    }
}
