package steelyard.harness.console;

import java.io.IOException;
import java.util.List;
import java.util.concurrent.atomic.AtomicBoolean;
import org.jline.terminal.Size;
import org.jline.terminal.Terminal;
import org.jline.utils.AttributedString;
import org.jline.utils.Display;
import org.jline.utils.InfoCmp.Capability;

/** A bar that is drawn again in place; its last state stays. Time is counted in its own ticks. */
final class ProgressBar implements Progress {
    private static final long TICK_MILLIS = 200;

    private final String title;
    private final String noun;
    private final long total;
    private final Terminal terminal;
    private final Display display;
    private final Size size;
    private final Ticker ticker = new Ticker(this::show);
    private final AtomicBoolean closed = new AtomicBoolean();
    private volatile long done;
    private long ticks;

    ProgressBar(String title, String noun, long total, Terminal terminal) {
        this.title = title;
        this.noun = noun;
        this.total = total;
        this.terminal = terminal;
        display = new Display(terminal, false);
        size = terminal.getSize();
        display.resize(size.getRows(), size.getColumns());
    }

    @Override
    public void begin() {
        terminal.echo(false); // a key pressed would move what is drawn
        terminal.puts(Capability.cursor_invisible);
        ticker.start(TICK_MILLIS);
    }

    @Override
    public void at(long now) {
        done = now;
    }

    @Override
    public int width() {
        return size.getColumns();
    }

    @Override
    public void close() {
        if (!closed.compareAndSet(false, true)) {
            return;
        }
        ticker.stop();
        terminal.puts(Capability.cursor_normal);
        terminal.writer().println();
        terminal.echo(true);
        terminal.flush();
        try {
            terminal.close();
        } catch (IOException gone) {
            // Nobody is left to look at it.
        }
    }

    private void show() {
        // The last column stays free: what a terminal does after writing it differs.
        int width = size.getColumns() - 1;
        AttributedString first =
                new AttributedString(SceneLines.pad(title, width, false).stripTrailing());
        AttributedString bar = new AttributedString(line(done, total, noun, ticks * TICK_MILLIS, width));
        ticks++;
        display.update(List.of(first, bar), size.cursorPos(1, bar.columnLength()));
    }

    /** {@code [#####.....]  100 of 200 plays, 4 s left}; the bar is left out where there is no room. */
    static String line(long done, long total, String noun, long elapsedMillis, int width) {
        String words =
                Figures.count(done) + " of " + Figures.count(total) + " " + noun + left(done, total, elapsedMillis);
        int room = Math.min(40, width - words.length() - 4);
        if (room < 5) {
            return SceneLines.pad(words, width, false).stripTrailing();
        }
        int full = (int) (room * done / total);
        return "[" + "#".repeat(full) + ".".repeat(room - full) + "]  " + words;
    }

    private static String left(long done, long total, long elapsedMillis) {
        if (done == 0 || done >= total) {
            return "";
        }
        long seconds = Math.max(1, Math.round(elapsedMillis * (double) (total - done) / done / 1000));
        return seconds < 120 ? ", " + seconds + " s left" : ", " + Math.round(seconds / 60.0) + " min left";
    }
}
