package steelyard.harness.cli;

import java.util.concurrent.Callable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Spec;

/** {@code version}. */
@Command(name = "version", description = "Show the version.", optionListHeading = "%nOptions:%n")
final class VersionCommand implements Callable<Integer> {
    @Mixin
    private HelpOption help = new HelpOption();

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public Integer call() {
        for (String line : new Versions().getVersion()) {
            spec.commandLine().getOut().println(line);
        }
        return ExitStatus.MET;
    }
}
