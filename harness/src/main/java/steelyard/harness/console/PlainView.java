package steelyard.harness.console;

import java.io.PrintWriter;
import java.util.Locale;
import java.util.Queue;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.concurrent.atomic.AtomicBoolean;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.harness.record.Guidance;
import steelyard.harness.record.PlayBoard;
import steelyard.harness.record.Words;

/** Plain lines: one every five seconds of play, one for every cue and every change of a standing. */
final class PlainView implements View {
    private static final long EVERY_NANOS = 5_000_000_000L;
    private static final long TICK_MILLIS = 100;

    private final Drill drill;
    private final PlayBoard board;
    private final PrintWriter out;
    private final Guidance guidance;
    private final Queue<String> events = new ConcurrentLinkedQueue<>();
    private final Ticker ticker = new Ticker(this::show);
    private final AtomicBoolean closed = new AtomicBoolean();

    /** Lines of state so far, by the play time that they stand for; the largest number after the last. */
    private long shown;

    PlainView(Drill drill, PlayBoard board, PrintWriter out) {
        this.drill = drill;
        this.board = board;
        this.out = out;
        guidance = new Guidance(drill.stage().backends().size());
    }

    @Override
    public void begin() {
        out.println(drill.name() + ", lasts " + Figures.seconds(drill.lastsNanos()));
        out.flush();
        ticker.start(TICK_MILLIS);
    }

    @Override
    public int width() {
        return Integer.MAX_VALUE;
    }

    @Override
    public void cueApplied(long atNanos, long dueNanos, Cue cue, By by) {
        events.add(line(atNanos, (by == By.HAND ? "cue by hand: " : "cue: ") + Scene.text(cue, by)));
    }

    @Override
    public void stood(Transition change) {
        String name = drill.stage().backends().get(change.backend()).name();
        events.add(line(
                change.atNanos(),
                name + ": " + Words.of(change.from()) + " to " + Words.of(change.to()) + " (" + Words.of(change.cause())
                        + ")"));
    }

    @Override
    public void loadRead(long atNanos, int backend, long number, int headroomMilli, boolean fresh) {
        String name = drill.stage().backends().get(backend).name();
        switch (guidance.take(backend, fresh)) {
            case NONE, BEGAN -> {}
            case LOST -> events.add(line(atNanos, name + ": no fresh reading of its load, so the set weight stands"));
            case BACK -> events.add(line(atNanos, name + ": weight goes by load again"));
        }
    }

    @Override
    public void close() {
        if (closed.compareAndSet(false, true)) {
            ticker.stop();
        }
    }

    private void show() {
        for (String event = events.poll(); event != null; event = events.poll()) {
            out.println(event);
        }
        PlayBoard.Figures figures = board.now();
        long before = Math.min(figures.atNanos(), drill.lastsNanos() - 1); // the end has a line of its own
        long due = figures.ended() ? Long.MAX_VALUE : before / EVERY_NANOS;
        if (due > shown) {
            shown = due;
            out.println(line(figures.atNanos(), status(figures)));
        }
        out.flush();
    }

    private String status(PlayBoard.Figures figures) {
        String failed = figures.failed() == 0
                ? "0"
                : Figures.count(figures.failed()) + " (" + Figures.causes(figures.failedBy()) + ")";
        long pickable = figures.backends().stream()
                .filter(PlayBoard.BackendFigures::pickable)
                .count();
        return Figures.traffic(figures, drill.lastsNanos()) + ", " + Figures.count(figures.good()) + " good, failed "
                + failed + ", pickable " + pickable + " of "
                + figures.backends().size() + Figures.balancer(figures);
    }

    private static String line(long atNanos, String text) {
        return String.format(Locale.ROOT, "%9s  %s", Figures.seconds(atNanos), text);
    }
}
