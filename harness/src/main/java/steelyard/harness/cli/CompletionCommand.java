package steelyard.harness.cli;

import java.util.List;
import java.util.concurrent.Callable;
import picocli.AutoComplete;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Spec;
import steelyard.drills.read.DrillLibrary;

/** {@code completion}. */
@Command(
        name = "completion",
        description = {
            "Print a script that completes commands and options in bash and zsh.",
            "For this shell: source <(harness/steelyard completion)"
        },
        optionListHeading = "%nOptions:%n")
final class CompletionCommand implements Callable<Integer> {
    private static final List<String> TAKE_A_DRILL = List.of("rehearse", "forecast", "tune", "check");
    private static final String FILES = "positionals=$( compgen -f -- \"${curr_word}\" ) # files";
    private static final String HEAD = """
            #!/usr/bin/env bash
            # Completes the commands and options of steelyard in bash and zsh. For this shell:
            #   source <(harness/steelyard completion)
            """;

    @Mixin
    private HelpOption help = new HelpOption();

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public Integer call() {
        String script = AutoComplete.bash("steelyard", spec.parent().commandLine());
        spec.commandLine().getOut().print(withDrills(HEAD + script.substring(afterHead(script))));
        return ExitStatus.MET;
    }

    /** The library's own head tells how to install scripts of programs that are packed in another way. */
    private static int afterHead(String script) {
        int at = 0;
        while (script.startsWith("#", at)) {
            at = script.indexOf('\n', at) + 1;
        }
        return at;
    }

    /** Where a drill is wanted, the names of the bundled ones stand beside the files. */
    private static String withDrills(String script) {
        String names = String.join("\\n", DrillLibrary.names());
        StringBuilder lines = new StringBuilder();
        boolean wanted = false;
        for (String line : script.split("\n", -1)) {
            if (line.startsWith("function ")) {
                wanted = TAKE_A_DRILL.stream().anyMatch(command -> line.contains("_steelyard_" + command + "("));
            }
            boolean files = wanted && line.endsWith(FILES);
            lines.append(
                            files
                                    ? line.replace(
                                            FILES,
                                            "positionals=$( compgen -W $'" + names + "' -f -- \"${curr_word}\" )")
                                    : line)
                    .append('\n');
        }
        return lines.substring(0, lines.length() - 1);
    }
}
