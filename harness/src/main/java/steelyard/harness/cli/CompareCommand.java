package steelyard.harness.cli;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import java.util.concurrent.Callable;
import java.util.stream.Collectors;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.Spec;
import steelyard.drills.model.Measure;
import steelyard.drills.read.NearWord;
import steelyard.harness.compare.CannotCompare;
import steelyard.harness.compare.CompareJson;
import steelyard.harness.compare.Comparison;
import steelyard.harness.compare.Runs;
import steelyard.harness.console.Terminals;

/** {@code compare}: what changed from one run to another by more than chance. */
@Command(
        name = "compare",
        description = "Say which measures changed from one run to another by more than chance.",
        parameterListHeading = "%n",
        optionListHeading = "%nOptions:%n",
        footerHeading = "%nWhat can be told:%n",
        footer = {
            "Two forecasts of the same seeds are compared play by play, other forecasts and several rehearsals by Welch's "
                    + "interval, a rehearsal and a forecast by the forecast's band, two single rehearsals by counts, "
                    + "where a measure is a share of counts. Intervals hold for all measures together with 95 %%.",
            "Exit status 1: a measure is worse by more than the margin and by more than chance."
        })
final class CompareCommand implements Callable<Integer> {
    @Parameters(
            index = "0",
            paramLabel = "RUN",
            description = "The first: a run folder, or a folder that holds run folders of one drill.")
    private Path first = Path.of("");

    @Parameters(index = "1", paramLabel = "RUN", description = "The second, which may be better or worse.")
    private Path second = Path.of("");

    @Option(
            names = "--margin",
            paramLabel = "SHARE",
            defaultValue = "5%",
            converter = ShareOfPlays.class,
            description =
                    "A change by less than that part of the first value is no change; ${DEFAULT-VALUE} unless given.")
    private double margin;

    @Option(names = "--only", paramLabel = "MEASURE", split = ",", description = "These measures alone: failed,latency")
    private List<String> only = new ArrayList<>();

    @Option(names = "--json", paramLabel = "FILE", description = "Write the comparison there too, as JSON.")
    private @Nullable Path json;

    @Mixin
    private HelpOption help = new HelpOption();

    @Spec
    private CommandSpec spec = CommandSpec.create();

    @Override
    public Integer call() throws CommandFailure {
        Set<Measure> measures = measures();
        try {
            Comparison comparison = Comparison.of(Runs.read(first), Runs.read(second), margin, measures);
            CompareText.lines(comparison, Terminals.width(Integer.MAX_VALUE))
                    .forEach(spec.commandLine().getOut()::println);
            write(comparison);
            return comparison.worse() ? ExitStatus.NOT_MET : ExitStatus.MET;
        } catch (CannotCompare cannot) {
            String line = "steelyard: " + cannot.getMessage();
            throw cannot.isMisnamed() ? CommandFailure.wrong(List.of(line)) : CommandFailure.cannot(line, cannot);
        }
    }

    private Set<Measure> measures() {
        Set<Measure> measures = EnumSet.noneOf(Measure.class);
        List<String> words = Stream.of(Measure.values()).map(Measure::word).toList();
        for (String each : only) {
            String word = each.strip();
            int place = words.indexOf(word);
            if (place < 0) {
                String known = "there are " + words.stream().collect(Collectors.joining(", "));
                throw new ParameterException(
                        spec.commandLine(),
                        "--only names no measure '" + word + "' (" + NearWord.remedy(word, words, known) + ")");
            }
            measures.add(Measure.values()[place]);
        }
        return measures;
    }

    private void write(Comparison comparison) throws CommandFailure {
        if (json == null) {
            return;
        }
        try {
            Files.writeString(json, CompareJson.text(comparison));
        } catch (IOException failure) {
            throw CommandFailure.cannot("steelyard: " + json + " cannot be written; name another file", failure);
        }
    }
}
