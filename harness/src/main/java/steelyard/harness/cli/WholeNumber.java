package steelyard.harness.cli;

import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.ParameterException;

/** Ranges of options that take whole numbers. */
final class WholeNumber {
    /** Plays of one drill or cell. */
    static final int MOST_PLAYS = 100_000;

    private WholeNumber() {}

    /** The value, or {@link ParameterException} when it is outside of {@code least} to {@code most}. */
    static int within(CommandSpec spec, String option, int value, int least, int most) {
        if (value < least || value > most) {
            throw new ParameterException(
                    spec.commandLine(),
                    option + " takes a whole number from " + least + " to " + most + ", not '" + value + "'");
        }
        return value;
    }
}
