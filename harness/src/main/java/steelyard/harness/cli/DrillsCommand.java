package steelyard.harness.cli;

import java.io.PrintWriter;
import java.util.List;
import java.util.concurrent.Callable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.Spec;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillLibrary;
import steelyard.drills.read.DrillReader;

/** {@code drills}: what there is to play, and to copy. */
@Command(
        name = "drills",
        description = "List the bundled drills, or print one to start an own drill from.",
        optionListHeading = "%nOptions:%n")
final class DrillsCommand implements Callable<Integer> {
    @Option(
            names = "--show",
            paramLabel = "NAME",
            completionCandidates = BundledNames.class,
            description = "Print the text of that drill.")
    private @Nullable String show;

    @Mixin
    private HelpOption help = new HelpOption();

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public Integer call() throws CommandFailure {
        PrintWriter out = spec.commandLine().getOut();
        if (show != null) {
            out.print(text(show));
            return ExitStatus.MET;
        }
        for (String name : DrillLibrary.names()) {
            Drill drill = DrillReader.read(name, DrillLibrary.text(name).orElseThrow())
                    .value()
                    .orElseThrow();
            out.println(name);
            out.println("    " + drill.name());
            out.println("    " + firstSentence(drill.about()));
        }
        out.println();
        out.println("`steelyard rehearse NAME` plays one; `steelyard drills --show NAME > my-drill.yaml` copies one.");
        return ExitStatus.MET;
    }

    private static String text(String name) throws CommandFailure {
        return DrillLibrary.text(name).orElseThrow(() -> CommandFailure.wrong(List.of(missing(name))));
    }

    private static String missing(String name) {
        return "steelyard: no bundled drill '" + name + "'; "
                + DrillLibrary.nearest(name)
                        .map(near -> "did you mean '" + near + "'?")
                        .orElse("`steelyard drills` lists them");
    }

    /** Up to the first full stop that a blank follows. */
    private static String firstSentence(String about) {
        int stop = about.indexOf(". ");
        return stop < 0 ? about.strip() : about.substring(0, stop + 1);
    }
}
