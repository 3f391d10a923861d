package steelyard.harness.cli;

import java.io.PrintWriter;
import java.nio.file.Path;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;
import steelyard.drills.model.Drill;

/** What every command that plays a drill takes: the drill, and how to show the play. */
final class DrillOptions {
    @Parameters(
            paramLabel = "DRILL",
            description = "A drill file, or the name of a bundled drill (`steelyard drills` lists them).")
    private Path drill = Path.of("");

    @Option(names = "--plain", description = "Write plain lines, on a terminal too.")
    private boolean plain;

    boolean plain() {
        return plain;
    }

    /** A drill that can be played, and where it was read. */
    record Opened(DrillSource source, Drill drill) {}

    /**
     * Reads the drill, once, and prints its notices.
     *
     * @throws CommandFailure when it cannot be read, or has problems
     */
    Opened open(PrintWriter err) throws CommandFailure {
        DrillSource source = DrillSource.named(drill);
        Opened opened = new Opened(source, source.drill());
        source.lines().forEach(err::println);
        return opened;
    }
}
