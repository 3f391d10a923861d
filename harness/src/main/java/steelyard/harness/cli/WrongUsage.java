package steelyard.harness.cli;

import java.util.List;
import java.util.Locale;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import picocli.CommandLine;
import picocli.CommandLine.IParameterExceptionHandler;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.UnmatchedArgumentException;

/** A wrong command line: one line that says what is wrong and what was probably meant. */
final class WrongUsage implements IParameterExceptionHandler {

    /** Digits that were refused all the same. */
    private static final Pattern BEYOND = Pattern.compile("'[+-]?\\d+' is not a whole number");

    @Override
    public int handleParseException(ParameterException found, String[] arguments) {
        CommandLine line = found.getCommandLine();
        ParameterException wrong = unmatchedFirst(found, line);
        String command = line.getCommandSpec().qualifiedName();
        line.getErr().println("steelyard: " + problem(wrong) + "; " + remedy(wrong, command));
        if (Steelyard.debug(line)) {
            wrong.printStackTrace(line.getErr());
        }
        return ExitStatus.WRONG;
    }

    /** A mistyped option explains a missing argument, not the other way round. */
    private static ParameterException unmatchedFirst(ParameterException found, CommandLine line) {
        List<String> unmatched = line.getUnmatchedArguments();
        return unmatched.isEmpty() || found instanceof UnmatchedArgumentException
                ? found
                : new UnmatchedArgumentException(line, unmatched);
    }

    private static String problem(ParameterException wrong) {
        if (wrong instanceof UnmatchedArgumentException unmatched) {
            String word = unmatched.getUnmatched().get(0);
            String command = takesCommands(wrong) ? "unknown command '" : "one argument too many, '";
            return (unmatched.isUnknownOption() ? "unknown option '" : command) + word + "'";
        }
        String message = String.valueOf(wrong.getMessage())
                .replaceAll("\\s*\\R\\s*", " ")
                .replaceAll("\\.$", "")
                .replace("subcommand", "command")
                .replace("is not a long", "is not a whole number")
                .replace("is not an int", "is not a whole number");
        Matcher beyond = BEYOND.matcher(message);
        if (beyond.find()) {
            message = message.replace(
                    "is not a whole number", "is out of range, from " + Long.MIN_VALUE + " to " + Long.MAX_VALUE);
        }
        return message.substring(0, 1).toLowerCase(Locale.ROOT) + message.substring(1);
    }

    private static String remedy(ParameterException wrong, String command) {
        if (wrong instanceof UnmatchedArgumentException unmatched) {
            List<String> near = unmatched.getSuggestions();
            if (!near.isEmpty()) {
                return "did you mean '" + near.get(0) + "'?";
            }
        }
        String help = command.contains(" ") ? command.replace("steelyard ", "steelyard help ") : "steelyard help";
        return "`" + help + "` shows what there is";
    }

    private static boolean takesCommands(ParameterException wrong) {
        return !wrong.getCommandLine().getSubcommands().isEmpty();
    }
}
