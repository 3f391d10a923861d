package steelyard.harness.cli;

import java.io.PrintWriter;
import java.nio.file.Path;
import java.util.List;
import java.util.concurrent.Callable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.Spec;
import steelyard.drills.model.Drill;
import steelyard.harness.record.Wording;

/** {@code check}: reads drills, reports every problem, plays nothing. */
@Command(
        name = "check",
        description = "Read drills and report every problem of each; play nothing.",
        parameterListHeading = "%n",
        optionListHeading = "%nOptions:%n")
final class CheckCommand implements Callable<Integer> {
    @Parameters(
            paramLabel = "DRILL",
            arity = "1..*",
            description = "A drill file, or the name of a bundled drill (`steelyard drills` lists them).")
    private List<Path> drills = List.of();

    @Mixin
    private HelpOption help = new HelpOption();

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public Integer call() {
        boolean allRight = true;
        for (Path path : drills) {
            allRight &= check(path);
        }
        return allRight ? ExitStatus.MET : ExitStatus.WRONG;
    }

    private boolean check(Path path) {
        PrintWriter err = spec.commandLine().getErr();
        try {
            DrillSource source = DrillSource.named(path);
            Drill drill = source.drill();
            source.lines().forEach(err::println);
            Playable.rates(drill, source.places()).forEach(err::println);
            spec.commandLine().getOut().println(source.name() + ": ok: " + summary(drill));
            return true;
        } catch (CommandFailure wrong) {
            wrong.lines().forEach(err::println);
            return false;
        }
    }

    private static String summary(Drill drill) {
        return drill.name() + ": " + counted(drill.stage().backends().size(), "backend") + ", "
                + counted(drill.cues().size(), "cue") + ", "
                + counted(drill.expectations().size(), "expectation") + ", lasts "
                + Wording.duration(drill.lastsNanos());
    }

    private static String counted(int count, String noun) {
        return count + " " + noun + (count == 1 ? "" : "s");
    }
}
