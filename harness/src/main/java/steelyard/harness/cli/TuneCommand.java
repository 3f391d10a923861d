package steelyard.harness.cli;

import java.io.PrintWriter;
import java.nio.file.Path;
import java.time.LocalDateTime;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.Callable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.Spec;
import steelyard.harness.tune.Aim;
import steelyard.harness.tune.Grid;
import steelyard.harness.tune.TuneRefused;
import steelyard.harness.tune.Tuning;
import steelyard.harness.tune.Variation;

/** {@code tune}: forecasts a grid of settings and says which it would take. */
@Command(
        name = "tune",
        description = "Forecast a drill under every combination of some settings, with the same seeds for each, and "
                + "show what one measure costs of another.",
        parameterListHeading = "%n",
        optionListHeading = "%nOptions:%n",
        footerHeading = "%nPaths and measures:%n",
        footer = {
            "A path names a key of the drill. probe.every is meant in every pool that has a probe, seats.probe.every in "
                    + "the pool seats, fulmar.weight of that backend; stage..., traffic..., cues... and lasts go from "
                    + "the top of the drill (traffic.rate, traffic.seats.rate, stage.pools.seats.probe.every).",
            "A measure is named by the first words of what is measured: failed, latency 99%%, share of fulmar. "
                    + "Expectations of the drill come before measures of the whole play.",
            "Cells are ranked by their means. A cell is non-dominated when no other is better on one measure and at "
                    + "least as good on the other. One is taken among the cells where all expectations hold: of those "
                    + "that no other such cell beats, the one whose larger loss to the best non-dominated cell is the smallest."
        })
final class TuneCommand implements Callable<Integer> {
    private static final int MOST_CONFIRMED = 100;

    @Mixin
    private DrillOptions drill = new DrillOptions();

    @Option(
            names = "--vary",
            required = true,
            paramLabel = "PATH=VALUE,...",
            description = "A setting and the values it is to take. Again for each further setting.")
    private List<String> vary = List.of();

    @Option(names = "--want", required = true, paramLabel = "MEASURE", description = "The measure to make better.")
    private String want = "";

    @Option(names = "--against", required = true, paramLabel = "MEASURE", description = "The measure that it may cost.")
    private String against = "";

    @Option(
            names = "--plays",
            paramLabel = "N",
            defaultValue = "100",
            description = "How many times to play each cell, 2 at least; ${DEFAULT-VALUE} unless given.")
    private int plays;

    @Option(
            names = "--hold",
            paramLabel = "SHARE",
            defaultValue = "90%",
            converter = ShareOfPlays.class,
            description =
                    "All expectations must hold together in at least that share of plays; ${DEFAULT-VALUE} unless "
                            + "given.")
    private double hold;

    @Option(
            names = "--confirm",
            paramLabel = "K",
            defaultValue = "0",
            description = "Rehearse the best K cells live, one after the other, and show forecast beside rehearsal.")
    private int confirm;

    @Option(
            names = "--out",
            paramLabel = "DIR",
            description = "The folder for the grid's files; it must not exist yet, or be empty. Otherwise a new one in "
                    + "runs/.")
    private @Nullable Path out;

    @Option(
            names = "--seed",
            paramLabel = "N",
            defaultValue = "1",
            description = "Seed of the first play of each cell, the next has one more; ${DEFAULT-VALUE} unless given.")
    private long seed;

    @Mixin
    private ThreadsOption threads = new ThreadsOption();

    @Mixin
    private HelpOption help = new HelpOption();

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public Integer call() throws Exception {
        WholeNumber.within(spec, "--plays", plays, 2, WholeNumber.MOST_PLAYS);
        WholeNumber.within(spec, "--confirm", confirm, 0, MOST_CONFIRMED);
        int atOnce = threads.atOnce(spec);
        PrintWriter err = spec.commandLine().getErr();
        DrillSource source = drill.open(err).source();
        Path folder = out == null ? RunPath.unused(source.stem() + "-tune", LocalDateTime.now()) : out;
        return new GridPlays(
                        source,
                        request(source),
                        atOnce,
                        drill.plain(),
                        spec.commandLine().getOut(),
                        err)
                .play(folder, confirm);
    }

    private Tuning.Request request(DrillSource source) throws CommandFailure {
        try {
            List<Variation> variations = new ArrayList<>();
            for (String each : vary) {
                variations.add(Variation.read(each));
            }
            Grid grid = Grid.of(source.name(), source.text(), source.folder(), variations);
            return new Tuning.Request(grid, new Aim(want), new Aim(against), seed, plays, hold);
        } catch (TuneRefused refused) {
            throw CommandFailure.wrong(List.of("steelyard: " + refused.getMessage()));
        }
    }
}
