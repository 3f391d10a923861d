package steelyard.harness.cli;

import picocli.CommandLine.Option;

/** {@code --help}, for every command. */
final class HelpOption {
    @Option(
            names = {"-h", "--help"},
            usageHelp = true,
            description = "Show this help.")
    private boolean wanted;
}
