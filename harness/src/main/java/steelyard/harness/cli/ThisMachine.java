package steelyard.harness.cli;

import java.lang.management.ManagementFactory;
import java.time.Instant;
import java.time.temporal.ChronoUnit;
import java.util.Locale;
import steelyard.backends.stub.Transport;
import steelyard.harness.record.Machine;

/** The facts of the machine that a play runs on, and the one reading of the wall clock that a run keeps. */
final class ThisMachine {
    private ThisMachine() {}

    static Machine now() {
        return with(Transport.best().name().toLowerCase(Locale.ROOT));
    }

    /** The same for plays in virtual time, which use no sockets. */
    static Machine virtual() {
        return with("none");
    }

    private static Machine with(String transport) {
        return new Machine(
                Instant.now().truncatedTo(ChronoUnit.SECONDS).toString(),
                Runtime.getRuntime().availableProcessors(),
                memoryBytes(),
                property("os.name") + " " + property("os.version") + " " + property("os.arch"),
                property("java.vm.name") + " " + property("java.vm.version"),
                transport,
                null);
    }

    private static long memoryBytes() {
        return ManagementFactory.getOperatingSystemMXBean() instanceof com.sun.management.OperatingSystemMXBean machine
                ? machine.getTotalMemorySize()
                : Runtime.getRuntime().maxMemory();
    }

    private static String property(String name) {
        return System.getProperty(name, "unknown");
    }
}
