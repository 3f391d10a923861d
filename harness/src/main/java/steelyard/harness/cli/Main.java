package steelyard.harness.cli;

import java.io.FileDescriptor;
import java.io.FileOutputStream;
import java.io.OutputStreamWriter;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;
import picocli.CommandLine;

/** Where the process begins and ends. */
public final class Main {
    private Main() {}

    public static void main(String[] arguments) {
        System.exit(run(writer(FileDescriptor.out), writer(FileDescriptor.err), arguments));
    }

    /**
     * Carries out a command line.
     *
     * @param out for results
     * @param err for errors, one a line
     * @return the exit status
     */
    static int run(PrintWriter out, PrintWriter err, String... arguments) {
        CommandLine line = new CommandLine(new Steelyard());
        line.setOut(out).setErr(err);
        line.setParameterExceptionHandler(new WrongUsage());
        line.setExecutionExceptionHandler(new FailureLines());
        line.setAbbreviatedOptionsAllowed(false);
        int status = line.execute(arguments);
        out.flush();
        err.flush();
        return status;
    }

    /** Titles of drills may be in any language, whatever the locale of the process says. */
    private static PrintWriter writer(FileDescriptor descriptor) {
        return new PrintWriter(new OutputStreamWriter(new FileOutputStream(descriptor), StandardCharsets.UTF_8), true);
    }
}
