package steelyard.harness.cli;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.UncheckedIOException;
import java.nio.file.Path;
import org.jspecify.annotations.Nullable;
import steelyard.harness.console.Progress;
import steelyard.harness.forecast.Forecast;
import steelyard.harness.forecast.ForecastRecorder;
import steelyard.harness.forecast.Played;
import steelyard.harness.forecast.Plays;
import steelyard.harness.forecast.Series;
import steelyard.harness.record.FolderRefused;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.RunHead;
import steelyard.harness.record.Wording;
import steelyard.harness.report.Report;
import steelyard.harness.stage.CannotPlay;

/** One drill foreseen: puts plays, recorder and progress together, and takes them apart. */
final class Forecasting {
    private final String source;
    private final Series series;
    private final double hold;
    private final int threads;
    private final PrintWriter out;
    private final PrintWriter err;

    /**
     * @param source the drill's text
     * @param hold the share of plays in which an expectation must hold, from 0 to 1
     * @param threads how many plays go on at once
     */
    Forecasting(String source, Series series, double hold, int threads, PrintWriter out, PrintWriter err) {
        this.source = source;
        this.series = series;
        this.hold = hold;
        this.threads = threads;
        this.out = out;
        this.err = err;
    }

    /**
     * Plays, writes the run and prints what is foreseen. After an interrupt, of the plays that had ended.
     *
     * @param plain plain lines on a terminal too
     * @return the exit status
     * @throws CommandFailure when it cannot be played, or the folder cannot be made or written
     */
    int play(Path path, boolean plain) throws CommandFailure {
        try {
            Plays.check(series.drill());
            RunFolder folder = RunFolder.create(path);
            Interrupts interrupts = Interrupts.listen();
            String title = series.drill().name() + ", " + Wording.count(series.plays(), "play", "plays") + " of "
                    + Wording.duration(series.drill().lastsNanos()) + " in virtual time";
            Progress progress = Progress.open(title, "plays", series.plays(), plain, err);
            interrupts.atSecond(progress::close, folder.path(), err);
            Forecast forecast;
            try {
                forecast = record(folder, progress, interrupts);
            } finally {
                progress.close();
            }
            boolean reported = report(folder);
            print(forecast, folder, interrupts.came(), reported, progress.width());
            return interrupts.came() ? interrupts.status() : status(forecast, reported);
        } catch (CannotPlay | FolderRefused cannot) {
            throw CommandFailure.cannot("steelyard: " + cannot.getMessage(), cannot);
        } catch (IOException | UncheckedIOException broken) {
            throw CommandFailure.cannot(
                    "steelyard: the run could not be written to " + path + ": " + FailureLines.oneLine(broken), broken);
        }
    }

    /** What is foreseen; null when not one play ended. */
    private @Nullable Forecast record(RunFolder folder, Progress progress, Interrupts interrupts)
            throws CannotPlay, IOException {
        RunHead head = new RunHead(series.drill(), source, "virtual", "virtual", series.seed(), Versions.steelyard());
        try (ForecastRecorder recorder = new ForecastRecorder(folder, head, series, hold, ThisMachine.virtual());
                Plays plays = new Plays(threads)) {
            interrupts.atFirst(plays::cancel);
            progress.begin();
            Played played = plays.play(series, recorder.bands(), play -> {
                recorder.played(play);
                progress.at(play.number() + 1L);
            });
            Forecast forecast = played.plays().isEmpty() ? null : Forecast.of(played, hold);
            recorder.finish(forecast);
            return forecast;
        }
    }

    private boolean report(RunFolder folder) {
        try {
            Report.write(folder.path());
            return true;
        } catch (IOException failure) {
            err.println("steelyard: no report: " + FailureLines.oneLine(failure));
            return false;
        }
    }

    private void print(
            @Nullable Forecast forecast, RunFolder folder, boolean interrupted, boolean reported, int width) {
        out.println();
        if (interrupted) {
            out.println(
                    forecast == null
                            ? "Interrupted before a play had ended; nothing is foreseen."
                            : "Interrupted; judged on the first "
                                    + Wording.count(forecast.played().plays().size(), "play", "plays") + " of "
                                    + series.plays() + ".");
        }
        if (forecast != null) {
            ForecastText.lines(forecast, width).forEach(out::println);
        }
        out.println();
        out.println("run     " + folder.path());
        if (reported) {
            out.println("report  " + folder.file(RunFolder.REPORT));
        }
        out.flush();
    }

    private static int status(@Nullable Forecast forecast, boolean reported) {
        if (forecast == null || !forecast.fit() || !reported) {
            return ExitStatus.CANNOT;
        }
        return forecast.met() ? ExitStatus.MET : ExitStatus.NOT_MET;
    }
}
