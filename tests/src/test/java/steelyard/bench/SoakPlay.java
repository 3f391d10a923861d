package steelyard.bench;

import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Set;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.concurrent.TimeUnit;
import java.util.stream.Stream;
import steelyard.accounting.OpenSockets;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Drill;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Machine;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Recorder;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.RunHead;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.Tee;
import steelyard.harness.record.Verdict;
import steelyard.harness.stage.live.LiveStage;

/** The play of {@link Soak}, and what is looked at when it is over. */
final class SoakPlay {
    private static final long SEED = 1;
    private static final int WARM_SECONDS = 4;
    private static final long WATCH_MILLIS = 30_000;
    private static final int FEWEST_READINGS = 12;
    private static final long LONGEST_MINUTES = 15;
    private static final int LONGEST_CLOSING_SECONDS = 20;

    /**
     * By what factor the heap may grow over the second half. It goes up and down by a tenth with the connections that
     * are open when it is read. Of some 20 MiB a fifth is 4 MiB; the smallest object that each of a million and a half
     * requests could leave behind, 16 bytes, would come to 23 MiB.
     */
    private static final double MOST_GROWTH = 1.20;

    /** A shorter play is over before the heap has its size, so its growth is told and not judged. */
    private static final int FEWEST_TO_JUDGE_GROWTH = 1_000_000;

    /** They say how well the machine kept up, not what became of the requests. */
    private static final Set<String> PACE = Set.of("lateness of the generator", "connection cap");

    private final int requests;
    private final Drill warming;
    private final Drill drill;
    private final BufferLeaks leaks;
    private final SoakCounts counts;
    private boolean sound = true;

    SoakPlay(int requests, int perSecond, BufferLeaks leaks) {
        this.requests = requests;
        this.leaks = leaks;
        warming = SoakDrill.of((long) perSecond * WARM_SECONDS, perSecond);
        drill = SoakDrill.of(requests, perSecond);
        counts = new SoakCounts(new Cast(drill));
    }

    /** Plays, prints, and says whether everything held. */
    boolean play() throws Exception {
        // The first play of a process opens what the process keeps for good.
        onStage(warming, new PlayListener() {});
        long socketsBefore = OpenSockets.count();
        SoakWatch watch = SoakWatch.start(watchMillis(), counts);
        Verdict verdict;
        try {
            verdict = recorded();
        } finally {
            watch.close();
        }
        say("");
        tell(verdict);
        tellLeftovers(socketsBefore, watch.growth());
        return sound;
    }

    private long watchMillis() {
        return Math.min(WATCH_MILLIS, TimeUnit.NANOSECONDS.toMillis(drill.lastsNanos()) / FEWEST_READINGS);
    }

    /** As a rehearsal is: what it keeps in memory is what is watched. */
    private Verdict recorded() throws Exception {
        Path path = Files.createTempDirectory("soak");
        try {
            Cast cast = new Cast(drill);
            Judge judge = new Judge(drill, cast);
            RunHead head = new RunHead(drill, "", "live", "embedded", SEED, "soak");
            Recorder recorder = new Recorder(RunFolder.create(path), head, cast, machine());
            onStage(drill, new Tee(recorder, judge, counts));
            return recorder.finish(judge.verdict());
        } finally {
            delete(path);
        }
    }

    private static Machine machine() {
        int processors = Runtime.getRuntime().availableProcessors();
        return new Machine("", processors, 0, "", System.getProperty("java.version"), "", null);
    }

    private static void onStage(Drill played, PlayListener listener) throws Exception {
        LiveStage stage = new LiveStage(played, SEED);
        Thread bound = new Thread(() -> interruptLate(stage), "soak-bound");
        bound.setDaemon(true);
        try (stage) {
            stage.open(listener);
            bound.start();
            stage.play(new Conductor(played, new Chance(SEED), new ConcurrentLinkedQueue<>()));
        } finally {
            bound.interrupt();
        }
    }

    /** A machine that falls far behind would not come to the end. */
    private static void interruptLate(LiveStage stage) {
        try {
            TimeUnit.MINUTES.sleep(LONGEST_MINUTES);
            stage.interrupt();
        } catch (InterruptedException over) {
            Thread.currentThread().interrupt();
        }
    }

    private void tell(Verdict verdict) {
        boolean kept = true;
        for (SelfCheck check : verdict.checks()) {
            say("%-45s %s %s", check.check(), check.ok() ? "ok " : "NOT", check.text());
            kept &= check.ok() || !PACE.contains(check.check());
            sound &= check.ok() || PACE.contains(check.check());
        }
        sound &= counts.balanced() && counts.offered() >= requests;
        say("%-45s %s %s", "plain counts", counts.balanced() ? "ok " : "NOT", counts.text());
        say("");
        say("requests: %d", counts.offered());
        say("counts-exact: %s", sound);
        say("kept-pace: %s", kept);
    }

    private void tellLeftovers(long socketsBefore, double growth) throws InterruptedException {
        long sockets = socketsLeft(socketsBefore);
        long lost = leaks.count();
        boolean noticing = leaks.works();
        say("sockets-left: %d", sockets);
        say("buffers-lost: %s", noticing ? lost : "not noticed here");
        say("heap-growth: %.3f", growth);
        sound &= sockets == 0 && lost == 0 && noticing;
        sound &= requests < FEWEST_TO_JUDGE_GROWTH || growth <= MOST_GROWTH;
    }

    /** Sockets beyond those of before; the last are closed a moment after the stage. */
    private static long socketsLeft(long before) throws InterruptedException {
        long left = OpenSockets.count() - before;
        for (int second = 0; left > 0 && second < LONGEST_CLOSING_SECONDS; second++) {
            TimeUnit.SECONDS.sleep(1);
            left = OpenSockets.count() - before;
        }
        return Math.max(0, left);
    }

    private static void delete(Path folder) throws Exception {
        List<Path> all = new ArrayList<>();
        try (Stream<Path> files = Files.walk(folder)) {
            files.sorted(Comparator.reverseOrder()).forEach(all::add);
        }
        for (Path each : all) {
            Files.delete(each);
        }
    }

    private static void say(String format, Object... values) {
        Forwarding.say(format, values);
    }
}
