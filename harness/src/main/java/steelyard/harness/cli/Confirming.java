package steelyard.harness.cli;

import java.io.PrintWriter;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import steelyard.drills.model.Measure.Unit;
import steelyard.drills.read.Parsed;
import steelyard.harness.forecast.Figure;
import steelyard.harness.record.FolderRefused;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunData.FindingRow;
import steelyard.harness.record.RunFolder;
import steelyard.harness.tune.Cell;
import steelyard.harness.tune.Confirmed;
import steelyard.harness.tune.Result;

/** Cells of a grid rehearsed live, one after the other, each in a run folder of its own. */
final class Confirming {
    private static final int FIRST_SIGNAL_STATUS = 128;

    private final DrillSource source;
    private final long seed;
    private final boolean plain;
    private final PrintWriter out;
    private final PrintWriter err;
    private final List<Confirmed> confirmed = new ArrayList<>();

    Confirming(DrillSource source, long seed, boolean plain, PrintWriter out, PrintWriter err) {
        this.source = source;
        this.seed = seed;
        this.plain = plain;
        this.out = out;
        this.err = err;
    }

    /** What was rehearsed to its end. */
    List<Confirmed> confirmed() {
        return List.copyOf(confirmed);
    }

    /**
     * Rehearses.
     *
     * @param ranked the best first
     * @return 0, or the exit status of an interrupt, after which nothing more is rehearsed
     */
    int rehearse(RunFolder folder, List<Result> ranked, int most) throws CommandFailure {
        for (Result result : ranked.subList(0, Math.min(most, ranked.size()))) {
            Cell cell = result.cell();
            String name = "rehearsal-of-cell-" + cell.number();
            out.println();
            out.println("Rehearsing cell " + cell.number() + ": " + cell.words());
            out.println();
            Path path = folder.file(name);
            int status = new Rehearsal(changed(cell), cell.drill(), seed, path, plain, out, err).play();
            if (status > FIRST_SIGNAL_STATUS) {
                return status;
            }
            confirmed.add(read(result, name, path));
        }
        return 0;
    }

    private DrillSource changed(Cell cell) {
        return new DrillSource(
                source.name(),
                source.stem(),
                cell.text(),
                source.folder(),
                new Parsed<>(Optional.of(cell.drill()), List.of()));
    }

    private Confirmed read(Result result, String name, Path path) throws CommandFailure {
        try {
            RunData run = RunData.read(RunFolder.existing(path));
            boolean fit = run.verdict() != null && run.verdict().fit();
            return new Confirmed(
                    result,
                    seed,
                    name,
                    fit,
                    value(run, result.want().figure()),
                    value(run, result.against().figure()));
        } catch (FolderRefused refused) {
            throw CommandFailure.cannot("steelyard: " + refused.getMessage(), refused);
        }
    }

    /** In the unit of the measure; files hold seconds. */
    private static double value(RunData run, Figure figure) {
        List<FindingRow> rows = new ArrayList<>(figure.bound() == null ? run.measures() : run.expectations());
        double value = rows.stream()
                .filter(each -> each.text().equals(figure.text()))
                .mapToDouble(FindingRow::value)
                .findFirst()
                .orElse(Double.NaN);
        return figure.unit() == Unit.DURATION ? value * 1e9 : value;
    }
}
