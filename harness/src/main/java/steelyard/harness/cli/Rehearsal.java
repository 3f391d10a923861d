package steelyard.harness.cli;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Chance;
import steelyard.balancer.live.ControlAddress;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Pool;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.console.View;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.FolderRefused;
import steelyard.harness.record.PlayBoard;
import steelyard.harness.record.Recorder;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.RunHead;
import steelyard.harness.record.Tee;
import steelyard.harness.record.Verdict;
import steelyard.harness.report.Report;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.Stage;
import steelyard.harness.stage.live.CuesByHand;
import steelyard.harness.stage.live.LiveStage;

/** One drill played live: puts stage, conductor, recorder, judge and view together, and takes them apart. */
final class Rehearsal {
    private final DrillSource source;
    private final Drill drill;
    private final long seed;
    private final RunFolder folder;
    private final PrintWriter out;
    private final PrintWriter err;
    private final Interrupts interrupts;
    private final Recorder recorder;
    private final Judge judge;
    private final View view;
    private final Tee listener;

    /**
     * @param plain plain lines on a terminal too
     * @throws CommandFailure when the run folder cannot be made
     */
    Rehearsal(DrillSource source, Drill drill, long seed, Path path, boolean plain, PrintWriter out, PrintWriter err)
            throws CommandFailure {
        this.source = source;
        this.drill = drill;
        this.seed = seed;
        this.out = out;
        this.err = err;
        folder = make(path);
        interrupts = Interrupts.listen();
        Cast cast = new Cast(drill);
        RunHead head = new RunHead(drill, source.text(), "live", "embedded", seed, Versions.steelyard());
        recorder = new Recorder(folder, head, cast, ThisMachine.now());
        judge = new Judge(drill, cast);
        PlayBoard board = new PlayBoard(cast);
        view = View.open(drill, board, plain, out);
        listener = new Tee(recorder, judge, board, view);
    }

    private static RunFolder make(Path path) throws CommandFailure {
        try {
            return RunFolder.create(path);
        } catch (FolderRefused refused) {
            throw CommandFailure.cannot("steelyard: " + refused.getMessage(), refused);
        }
    }

    /**
     * Plays, writes the run and prints the verdict.
     *
     * @return the exit status
     * @throws CommandFailure when it cannot be played here
     */
    int play() throws CommandFailure {
        interrupts.atSecond(view::close, folder.path(), err);
        CannotPlay broken = onStage();
        Verdict verdict = recorder.finish(judge.verdict());
        boolean reported = report();
        if (broken != null) {
            throw CommandFailure.cannot("steelyard: the play broke off: " + broken.getMessage(), broken);
        }
        print(verdict, reported);
        return status(verdict, reported);
    }

    /** Returns why the play broke off, or null when it came to its end or was interrupted. */
    private @Nullable CannotPlay onStage() throws CommandFailure {
        FirstSteps.play(drill, seed, interrupts);
        LiveStage stage = new LiveStage(drill, seed);
        try {
            interrupts.atFirst(stage::interrupt);
            Conductor conductor = new Conductor(drill, new Chance(seed), new ConcurrentLinkedQueue<>());
            open(stage, new CuesByHand(drill, conductor));
            view.begin();
            stage.play(conductor);
            return null;
        } catch (CannotPlay broken) {
            return broken;
        } finally {
            view.close();
            close(stage);
        }
    }

    private void open(LiveStage stage, CuesByHand cues) throws CommandFailure {
        try {
            stage.open(listener);
            if (!stage.clientsHaveAddresses()) {
                err.println(
                        "steelyard: this system has no loopback network but 127.0.0.1: all clients connect from there");
            }
            ControlAddress control = stage.openControl(cues);
            out.println("control %s with /metrics, /state and /cues (bearer token %s)"
                    .formatted(control.base(), control.token()));
        } catch (CannotPlay cannot) {
            discard();
            throw CommandFailure.cannot(line(String.valueOf(cannot.getMessage())), cannot);
        }
    }

    /** A port that the drill asked for is shown where it did. */
    private String line(String problem) {
        for (Pool pool : drill.stage().pools()) {
            String port = "port " + pool.wire().front().port();
            if (pool.wire().front().port() != 0 && problem.startsWith("the front of pool " + pool.name() + " ")) {
                String why = problem.substring(problem.indexOf(port));
                int end = why.indexOf(": ");
                return source.places()
                        .problem(why.substring(0, end), why.substring(end + 2), "stage", "pools", pool.name(), "front")
                        .toString();
            }
        }
        return "steelyard: " + problem;
    }

    /** Nothing was played, so nothing is left behind; the folder was empty before. */
    private void discard() {
        try (Stream<Path> files = Files.list(folder.path())) {
            for (Path file : files.toList()) {
                Files.delete(file);
            }
            Files.delete(folder.path());
        } catch (IOException | UncheckedIOException kept) {
            err.println("steelyard: " + folder.path() + " could not be removed again; remove it by hand");
        }
    }

    /** A stage that does not close cleanly takes nothing away from the verdict. */
    private void close(Stage stage) {
        try {
            stage.close();
        } catch (RuntimeException failure) {
            err.println("steelyard: " + FailureLines.oneLine(failure));
        }
    }

    private boolean report() {
        try {
            Report.write(folder.path());
            return true;
        } catch (IOException failure) {
            err.println("steelyard: no report: " + FailureLines.oneLine(failure));
            return false;
        }
    }

    private void print(Verdict verdict, boolean reported) {
        out.println();
        List<String> lines = VerdictText.lines(verdict, view.width());
        lines.forEach(out::println);
        out.println();
        out.println("run     " + folder.path());
        if (reported) {
            out.println("report  " + folder.file(RunFolder.REPORT));
        }
        out.flush();
    }

    private int status(Verdict verdict, boolean reported) {
        if (interrupts.came()) {
            return interrupts.status();
        }
        if (!verdict.fit() || !reported) {
            return ExitStatus.CANNOT;
        }
        return verdict.met() ? ExitStatus.MET : ExitStatus.NOT_MET;
    }
}
