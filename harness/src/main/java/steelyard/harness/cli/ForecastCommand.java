package steelyard.harness.cli;

import java.io.PrintWriter;
import java.nio.file.Path;
import java.time.LocalDateTime;
import java.util.concurrent.Callable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.Spec;
import steelyard.drills.model.Drill;
import steelyard.harness.forecast.Series;

/** {@code forecast}: plays a drill many times in virtual time and says in what share of plays each expectation holds. */
@Command(
        name = "forecast",
        description = "Play a drill many times in virtual time, write the run folder, and say what share of plays "
                + "meets each expectation.",
        parameterListHeading = "%n",
        optionListHeading = "%nOptions:%n")
final class ForecastCommand implements Callable<Integer> {
    private static final int MOST_PLAYS = 100_000;
    private static final int MOST_THREADS = 256;

    @Parameters(
            paramLabel = "DRILL",
            description = "A drill file, or the name of a bundled drill (`steelyard drills` lists them).")
    private Path drill = Path.of("");

    @Option(
            names = "--plays",
            paramLabel = "N",
            defaultValue = "200",
            description = "How many times to play it; ${DEFAULT-VALUE} unless given.")
    private int plays;

    @Option(
            names = "--hold",
            paramLabel = "SHARE",
            defaultValue = "90%",
            converter = ShareOfPlays.class,
            description =
                    "An expectation is met when it holds in at least that share of plays; ${DEFAULT-VALUE} unless "
                            + "given.")
    private double hold;

    @Option(
            names = "--out",
            paramLabel = "DIR",
            description = "The run folder; it must not exist yet, or be empty. Otherwise a new one in runs/.")
    private @Nullable Path out;

    @Option(
            names = "--seed",
            paramLabel = "N",
            defaultValue = "1",
            description = "Seed of the first play, the next has one more; ${DEFAULT-VALUE} unless given.")
    private long seed;

    @Option(names = "--plain", description = "Write plain lines, on a terminal too.")
    private boolean plain;

    @Option(
            names = "--threads",
            paramLabel = "N",
            description = "How many plays go on at once; one a processor unless given. Changes no figure.")
    private @Nullable Integer threads;

    @Mixin
    private HelpOption help = new HelpOption();

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public Integer call() throws Exception {
        check("--plays", plays, MOST_PLAYS);
        int atOnce = threads == null
                ? Math.min(MOST_THREADS, Runtime.getRuntime().availableProcessors())
                : check("--threads", threads, MOST_THREADS);
        DrillSource source = DrillSource.named(drill);
        Drill read = source.drill();
        PrintWriter err = spec.commandLine().getErr();
        source.lines().forEach(err::println);
        Path folder = out == null ? RunPath.unused(source.stem(), LocalDateTime.now()) : out;
        return new Forecasting(
                        source.text(),
                        Series.of(read, seed, plays),
                        hold,
                        atOnce,
                        spec.commandLine().getOut(),
                        err)
                .play(folder, plain);
    }

    private int check(String option, int value, int most) {
        if (value < 1 || value > most) {
            throw new ParameterException(
                    spec.commandLine(), option + " takes a whole number from 1 to " + most + ", not '" + value + "'");
        }
        return value;
    }
}
