package steelyard.harness.cli;

import java.io.PrintWriter;
import java.util.List;
import picocli.CommandLine;
import picocli.CommandLine.IExecutionExceptionHandler;
import picocli.CommandLine.ParseResult;

/** A command that failed: its lines; for what nobody expected, one line and where to look. */
final class FailureLines implements IExecutionExceptionHandler {

    @Override
    public int handleExecutionException(Exception failure, CommandLine line, ParseResult parsed) {
        PrintWriter err = line.getErr();
        boolean debug = Steelyard.debug(line);
        int status;
        if (failure instanceof CommandFailure known) {
            known.lines().forEach(err::println);
            status = known.status();
        } else {
            err.println("steelyard: unexpected: " + oneLine(failure)
                    + (debug ? "" : "; the same command with --debug shows where"));
            status = ExitStatus.CANNOT;
        }
        if (debug) {
            failure.printStackTrace(err);
        }
        return status;
    }

    static String oneLine(Throwable failure) {
        String message = failure.getMessage();
        String what = message == null ? failure.getClass().getSimpleName() : message;
        return String.join(" ", List.of(what.strip().split("\\s*\\R\\s*")));
    }
}
