package steelyard.harness.cli;

import java.util.concurrent.Callable;
import picocli.AutoComplete;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Spec;

/** {@code completion}. */
@Command(
        name = "completion",
        description = {
            "Print a script that completes commands and options in bash and zsh.",
            "For this shell: source <(harness/steelyard completion)"
        })
final class CompletionCommand implements Callable<Integer> {
    @Mixin
    private HelpOption help = new HelpOption();

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public Integer call() {
        spec.commandLine()
                .getOut()
                .print(AutoComplete.bash("steelyard", spec.parent().commandLine()));
        return ExitStatus.MET;
    }
}
