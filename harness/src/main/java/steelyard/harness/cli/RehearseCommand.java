package steelyard.harness.cli;

import java.io.PrintWriter;
import java.nio.file.Path;
import java.time.LocalDateTime;
import java.util.Iterator;
import java.util.List;
import java.util.concurrent.Callable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.Spec;

/** {@code rehearse}: plays a drill live and prints the verdict. */
@Command(
        name = "rehearse",
        description = "Play a drill on real sockets, write the run folder, and say which expectations were met.",
        parameterListHeading = "%n",
        optionListHeading = "%nOptions:%n",
        footerHeading = "%nCaution:%n",
        footer = {
            "Everything is started by Steelyard itself and bound to the loopback interface; faults reach nothing else. "
                    + "Rehearse only on systems of your own, or with the authority to do so, and under the change "
                    + "procedure of the place. A rehearsal never replaces that procedure or its approvals."
        })
final class RehearseCommand implements Callable<Integer> {
    private static final String EMBEDDED = "embedded";

    /** Where backends can run, for shell completion. */
    static final class Places implements Iterable<String> {
        @Override
        public Iterator<String> iterator() {
            return List.of(EMBEDDED).iterator();
        }
    }

    @Mixin
    private DrillOptions drill = new DrillOptions();

    @Option(
            names = "--backends",
            paramLabel = "WHERE",
            defaultValue = EMBEDDED,
            completionCandidates = Places.class,
            description = "Where the backends run: embedded, in this process (the only choice).")
    private String backends = EMBEDDED;

    @Option(
            names = "--out",
            paramLabel = "DIR",
            description = "The run folder; it must not exist yet, or be empty. Otherwise a new one in runs/.")
    private @Nullable Path out;

    @Option(
            names = "--seed",
            paramLabel = "N",
            defaultValue = "1",
            description = "Whole number that all chance is drawn from; ${DEFAULT-VALUE} unless given.")
    private long seed;

    @Mixin
    private HelpOption help = new HelpOption();

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public Integer call() throws Exception {
        if (!backends.equals(EMBEDDED)) {
            throw new ParameterException(
                    spec.commandLine(), "--backends can only be " + EMBEDDED + ", not '" + backends + "'");
        }
        PrintWriter err = spec.commandLine().getErr();
        DrillOptions.Opened opened = drill.open(err);
        DrillSource source = opened.source();
        Path folder = out == null ? RunPath.unused(source.stem(), LocalDateTime.now()) : out;
        return new Rehearsal(
                        source,
                        opened.drill(),
                        seed,
                        folder,
                        drill.plain(),
                        spec.commandLine().getOut(),
                        err)
                .play();
    }
}
