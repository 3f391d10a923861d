package steelyard.harness.compare;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.stream.Collectors;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;
import steelyard.harness.forecast.PlayTable;
import steelyard.harness.record.FolderRefused;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunFolder;

/**
 * One side of a comparison: a rehearsal, several rehearsals of the same drill, or a forecast.
 *
 * @param path as it was named
 * @param runs one, or the several of a folder in the order of their names
 * @param plays of a forecast, or null
 */
public record Runs(Path path, List<RunData> runs, @Nullable PlayTable plays) {
    public Runs {
        runs = List.copyOf(runs);
    }

    /**
     * Reads a run folder, or a folder that holds run folders.
     *
     * @throws CannotCompare when it is neither, or a run has no verdict, was interrupted or is unfit to judge
     */
    public static Runs read(Path path) throws CannotCompare {
        List<Path> folders = folders(path);
        List<RunData> runs = new ArrayList<>();
        for (Path folder : folders) {
            runs.add(run(folder));
        }
        RunData first = runs.get(0);
        if (runs.size() == 1) {
            return new Runs(path, runs, first.forecast() == null ? null : plays(folders.get(0)));
        }
        for (int at = 0; at < runs.size(); at++) {
            if (runs.get(at).forecast() != null) {
                throw CannotCompare.misnamed(
                        folders.get(at) + " is a forecast among others; name one forecast, or a folder of rehearsals");
            }
            if (!runs.get(at).source().equals(first.source())) {
                throw CannotCompare.misnamed(folders.get(at) + " is of another drill or other settings than "
                        + folders.get(0) + "; keep runs of one drill in a folder");
            }
        }
        return new Runs(path, runs, null);
    }

    private static List<Path> folders(Path path) throws CannotCompare {
        if (Files.isRegularFile(path.resolve(RunFolder.RUN))) {
            return List.of(path);
        }
        if (!Files.isDirectory(path)) {
            throw CannotCompare.misnamed(
                    path + " is not a folder; name a run folder, such as `steelyard rehearse` leaves");
        }
        try (Stream<Path> inside = Files.list(path)) {
            List<Path> folders = inside.filter(each -> Files.isRegularFile(each.resolve(RunFolder.RUN)))
                    .sorted()
                    .toList();
            if (folders.isEmpty()) {
                throw CannotCompare.misnamed(
                        path + " holds no run: there is no " + RunFolder.RUN + " in it or in a folder of it");
            }
            return folders;
        } catch (IOException | UncheckedIOException e) {
            throw CannotCompare.unusable(path + " cannot be read");
        }
    }

    private static RunData run(Path folder) throws CannotCompare {
        RunData run;
        try {
            run = RunData.read(RunFolder.existing(folder));
        } catch (FolderRefused refused) {
            throw CannotCompare.unusable(String.valueOf(refused.getMessage()));
        } catch (RuntimeException broken) {
            throw CannotCompare.unusable(folder + " is damaged: its files do not hold what a run's do");
        }
        if (run.verdict() == null || !run.ended().equals("complete")) {
            String why = run.ended().equals("interrupted") ? "was interrupted" : "did not come to its end";
            throw CannotCompare.unusable(folder + " " + why + ", so it has measures of a part only; play it again");
        }
        if (!run.verdict().fit()) {
            throw CannotCompare.unusable(folder + " is unfit to judge, so nothing can be told from it; play it again");
        }
        return run;
    }

    private static PlayTable plays(Path folder) throws CannotCompare {
        try {
            return PlayTable.read(RunFolder.existing(folder));
        } catch (FolderRefused refused) {
            throw CannotCompare.unusable(String.valueOf(refused.getMessage()));
        }
    }

    /** Any of the runs; they are of one drill. */
    RunData first() {
        return runs.get(0);
    }

    boolean forecast() {
        return plays != null;
    }

    /** What it is, in words: {@code forecast of 200 plays}, {@code 3 rehearsals}. */
    public String words() {
        if (plays != null) {
            return "forecast of " + plays.rows().size() + " plays";
        }
        return runs.size() == 1 ? "rehearsal" : runs.size() + " rehearsals";
    }

    /** How many cues a person sent, in all of the runs together. */
    long handCues() {
        return runs.stream().mapToLong(RunData::handCues).sum();
    }

    /** Seeds in words: {@code 1 to 200}, {@code 1, 1, 2}. */
    String seeds() {
        if (plays == null || plays.rows().isEmpty()) {
            return runs.stream().map(run -> String.valueOf(run.seed())).collect(Collectors.joining(", "));
        }
        long last = plays.rows().get(plays.rows().size() - 1).seed();
        return plays.rows().get(0).seed() + " to " + last;
    }

    /** What is measured, expectations first; what an expectation measures too is left out of the measures. */
    List<Sample> samples() {
        List<Sample> samples = new ArrayList<>();
        for (int place = 0; place < first().expectations().size(); place++) {
            add(samples, true, place);
        }
        for (int place = 0; place < first().measures().size(); place++) {
            add(samples, false, place);
        }
        return samples;
    }

    private void add(List<Sample> samples, boolean expected, int place) {
        RunData.FindingRow row = (expected ? first().expectations() : first().measures()).get(place);
        Optional<Sample> same = samples.stream()
                .filter(each -> each.row().text().equals(row.text()))
                .findFirst();
        if (same.isEmpty()) {
            samples.add(new Sample(row, expected, values(expected, place)));
        }
    }

    private double[] values(boolean expected, int place) {
        if (plays != null) {
            int figure = expected ? place : first().expectations().size() + place;
            return figure < plays.titles().size() ? plays.values(figure) : new double[0];
        }
        return runs.stream()
                .mapToDouble(run -> value(expected ? run.expectations() : run.measures(), place))
                .toArray();
    }

    private static double value(List<RunData.FindingRow> rows, int place) {
        return place < rows.size() ? rows.get(place).value() : Double.NaN;
    }
}
