package steelyard.harness.cli;

import java.io.IOException;
import java.io.PrintWriter;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import steelyard.drills.model.Drill;
import steelyard.harness.console.Progress;
import steelyard.harness.record.FolderRefused;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.Wording;
import steelyard.harness.report.TunePage;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.tune.Confirmed;
import steelyard.harness.tune.GridFiles;
import steelyard.harness.tune.TuneRefused;
import steelyard.harness.tune.Tuning;
import steelyard.harness.tune.Tuning.Tuned;

/** A grid played: puts plays, progress, files and rehearsals together. */
final class GridPlays {
    private final DrillSource source;
    private final Tuning.Request request;
    private final int threads;
    private final boolean plain;
    private final PrintWriter out;
    private final PrintWriter err;

    /** @param threads how many plays go on at once */
    GridPlays(
            DrillSource source, Tuning.Request request, int threads, boolean plain, PrintWriter out, PrintWriter err) {
        this.source = source;
        this.request = request;
        this.threads = threads;
        this.plain = plain;
        this.out = out;
        this.err = err;
    }

    /**
     * Plays, writes the files, prints the trade-off and rehearses the best. After an interrupt, of the cells that were
     * complete.
     *
     * @return the exit status
     * @throws CommandFailure when it cannot be played, or the folder cannot be made or written
     */
    int play(Path path, int confirm) throws CommandFailure {
        try (Tuning tuning = new Tuning(request, threads)) {
            RunFolder folder = RunFolder.create(path);
            Interrupts interrupts = Interrupts.listen();
            Progress progress = Progress.open(title(), "plays", request.allPlays(), plain, err);
            interrupts.atFirst(tuning::cancel);
            interrupts.atSecond(progress::close, folder.path(), err);
            Tuned tuned = tuned(tuning, progress);
            if (tuned.results().isEmpty()) {
                out.println();
                out.println("Interrupted before a cell was complete; there is nothing to show.");
                Files.deleteIfExists(folder.path());
                return interrupts.status();
            }
            write(folder, tuned, List.of());
            print(tuned, folder, progress.width());
            if (interrupts.came()) {
                return interrupts.status();
            }
            return confirmed(folder, tuned, confirm, progress.width());
        } catch (TuneRefused refused) {
            throw CommandFailure.wrong(List.of("steelyard: " + refused.getMessage()));
        } catch (CannotPlay | FolderRefused cannot) {
            throw CommandFailure.cannot("steelyard: " + cannot.getMessage(), cannot);
        } catch (IOException broken) {
            throw CommandFailure.cannot(
                    "steelyard: the grid could not be written to " + path + ": " + FailureLines.oneLine(broken),
                    broken);
        }
    }

    private String title() throws CommandFailure {
        Drill drill = source.drill();
        return drill.name() + ", " + Wording.count(request.grid().cells().size(), "cell", "cells") + " of "
                + Wording.count(request.plays(), "play", "plays") + " in virtual time";
    }

    private static Tuned tuned(Tuning tuning, Progress progress) throws CannotPlay {
        try {
            progress.begin();
            return tuning.play(progress::at);
        } finally {
            progress.close();
        }
    }

    private void write(RunFolder folder, Tuned tuned, List<Confirmed> confirmed) throws IOException, CommandFailure {
        Drill drill = source.drill();
        GridFiles.write(folder, tuned, confirmed, drill.name(), source.text(), Versions.steelyard());
        TunePage.write(folder, tuned, confirmed, drill, source.text(), Versions.steelyard());
    }

    private void print(Tuned tuned, RunFolder folder, int width) {
        out.println();
        TuneText.lines(tuned, width).forEach(out::println);
        out.println();
        out.println("grid    " + folder.file(GridFiles.CSV));
        out.println("report  " + folder.file(TunePage.FILE));
        out.flush();
    }

    private int confirmed(RunFolder folder, Tuned tuned, int confirm, int width) throws IOException, CommandFailure {
        if (confirm > 0) {
            Confirming confirming = new Confirming(source, request.seed(), plain, out, err);
            int interrupted = confirming.rehearse(folder, tuned.choice().ranked(), confirm);
            write(folder, tuned, confirming.confirmed());
            out.println();
            TuneText.confirmed(confirming.confirmed(), width).forEach(out::println);
            out.flush();
            if (interrupted != 0) {
                return interrupted;
            }
        }
        return tuned.choice().taken().isPresent() ? ExitStatus.MET : ExitStatus.NOT_MET;
    }
}
