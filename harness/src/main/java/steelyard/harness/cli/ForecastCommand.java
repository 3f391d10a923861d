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
import picocli.CommandLine.Spec;
import steelyard.harness.forecast.Series;

/** {@code forecast}: plays a drill many times in virtual time and says in what share of plays each expectation holds. */
@Command(
        name = "forecast",
        description = "Play a drill many times in virtual time, write the run folder, and say what share of plays "
                + "meets each expectation.",
        parameterListHeading = "%n",
        optionListHeading = "%nOptions:%n")
final class ForecastCommand implements Callable<Integer> {

    @Mixin
    private DrillOptions drill = new DrillOptions();

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

    @Mixin
    private ThreadsOption threads = new ThreadsOption();

    @Mixin
    private HelpOption help = new HelpOption();

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public Integer call() throws Exception {
        WholeNumber.within(spec, "--plays", plays, 1, WholeNumber.MOST_PLAYS);
        int atOnce = threads.atOnce(spec);
        PrintWriter err = spec.commandLine().getErr();
        DrillOptions.Opened opened = drill.open(err);
        DrillSource source = opened.source();
        Path folder = out == null ? RunPath.unused(source.stem(), LocalDateTime.now()) : out;
        return new Forecasting(
                        source.text(),
                        Series.of(opened.drill(), seed, plays),
                        hold,
                        atOnce,
                        spec.commandLine().getOut(),
                        err)
                .play(folder, drill.plain());
    }
}
