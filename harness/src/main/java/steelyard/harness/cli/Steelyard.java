package steelyard.harness.cli;

import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.HelpCommand;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.ScopeType;
import picocli.CommandLine.Spec;

/** The command without a word after it, and what all commands share. */
@Command(
        name = "steelyard",
        description = "Rehearses failover: plays a drill on real sockets and says which expectations were met.",
        synopsisSubcommandLabel = "COMMAND",
        commandListHeading = "%nCommands:%n",
        optionListHeading = "%nOptions:%n",
        exitCodeListHeading = "%nExit status:%n",
        exitCodeList = {
            "0:every expectation was met",
            "1:an expectation was not met",
            "2:the drill or the command line is wrong",
            "3:it could not be played here, or is unfit to judge",
            "129:the terminal is gone",
            "130:interrupted",
            "143:terminated"
        },
        versionProvider = Versions.class,
        subcommands = {
            RehearseCommand.class,
            ForecastCommand.class,
            TuneCommand.class,
            CompareCommand.class,
            CheckCommand.class,
            DrillsCommand.class,
            CompletionCommand.class,
            VersionCommand.class,
            HelpCommand.class
        })
final class Steelyard implements Runnable {
    @Option(
            names = "--debug",
            scope = ScopeType.INHERIT,
            description = "Show the stack trace of an error that stops a command.")
    private boolean debug;

    @Mixin
    private HelpOption help = new HelpOption();

    @Option(
            names = {"-V", "--version"},
            versionHelp = true,
            description = "Show the version.")
    private boolean version;

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public void run() {
        throw new ParameterException(spec.commandLine(), "a command is missing");
    }

    /** Whether a command line, however deep its command, was given {@code --debug}. */
    static boolean debug(CommandLine line) {
        CommandLine top = line;
        while (top.getParent() != null) {
            top = top.getParent();
        }
        return ((Steelyard) top.getCommandSpec().userObject()).debug;
    }
}
