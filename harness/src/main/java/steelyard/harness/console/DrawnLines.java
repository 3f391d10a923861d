package steelyard.harness.console;

import java.io.IOException;
import java.util.List;
import java.util.concurrent.atomic.AtomicBoolean;
import org.jline.terminal.Size;
import org.jline.terminal.Terminal;
import org.jline.utils.AttributedString;
import org.jline.utils.Display;
import org.jline.utils.InfoCmp.Capability;

/**
 * Lines that are drawn again in place, below what the terminal showed before, until they are closed; their last state stays
 * there. Only lines that changed are written.
 *
 * <p>{@link #update} and {@link #measure} are called by the tick alone, {@link #close} by any thread; again does no harm.
 */
final class DrawnLines {
    static final long TICK_MILLIS = 200;

    private final Terminal terminal;
    private final Display display;
    private final Ticker ticker;
    private final AtomicBoolean closed = new AtomicBoolean();
    private volatile Size size;

    /** @param tick draws; called every {@link #TICK_MILLIS} between {@link #begin} and {@link #close}, and at the end */
    DrawnLines(Terminal terminal, Runnable tick) {
        this.terminal = terminal;
        ticker = new Ticker(tick);
        display = new Display(terminal, false);
        size = terminal.getSize();
        display.resize(size.getRows(), size.getColumns());
    }

    void begin() {
        terminal.echo(false); // a key pressed would move what is drawn
        terminal.puts(Capability.cursor_invisible);
        ticker.start(TICK_MILLIS);
    }

    Size size() {
        return size;
    }

    /** The terminal has another size: what it made of the old lines is unknown, so the screen is cleared. */
    void measure() {
        size = terminal.getSize();
        terminal.puts(Capability.clear_screen);
        display.reset();
        display.resize(size.getRows(), size.getColumns());
    }

    /** Draws; the cursor rests after the last line, so that whatever is printed next stands below. */
    void update(List<AttributedString> lines) {
        int last = lines.size() - 1;
        display.update(lines, size.cursorPos(last, lines.get(last).columnLength()));
    }

    void close() {
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
}
