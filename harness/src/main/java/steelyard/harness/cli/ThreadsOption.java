package steelyard.harness.cli;

import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;

/** How many plays go on at once, for every command that plays in virtual time. */
final class ThreadsOption {
    private static final int MOST_THREADS = 256;

    @Option(
            names = "--threads",
            paramLabel = "N",
            description = "How many plays go on at once; one a processor unless given. Changes no figure.")
    private @Nullable Integer threads;

    /** Throws {@link picocli.CommandLine.ParameterException} for a number out of range. */
    int atOnce(CommandSpec spec) {
        return threads == null
                ? Math.min(MOST_THREADS, Runtime.getRuntime().availableProcessors())
                : WholeNumber.within(spec, "--threads", threads, 1, MOST_THREADS);
    }
}
