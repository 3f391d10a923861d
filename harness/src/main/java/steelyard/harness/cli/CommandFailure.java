package steelyard.harness.cli;

import java.util.List;
import org.jspecify.annotations.Nullable;

/** A command cannot be carried out: an exit status, and lines for standard error. */
final class CommandFailure extends Exception {
    private static final long serialVersionUID = 1L;

    private final int status;
    private final transient List<String> lines;

    private CommandFailure(int status, List<String> lines, @Nullable Throwable cause) {
        super(String.join("; ", lines), cause);
        this.status = status;
        this.lines = List.copyOf(lines);
    }

    /** The drill or the command line is wrong. */
    static CommandFailure wrong(List<String> lines) {
        return new CommandFailure(ExitStatus.WRONG, lines, null);
    }

    /** This machine cannot. */
    static CommandFailure cannot(String line, @Nullable Throwable cause) {
        return new CommandFailure(ExitStatus.CANNOT, List.of(line), cause);
    }

    int status() {
        return status;
    }

    List<String> lines() {
        return lines;
    }
}
