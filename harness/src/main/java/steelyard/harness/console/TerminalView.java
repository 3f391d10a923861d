package steelyard.harness.console;

import java.io.IOException;
import java.util.List;
import java.util.concurrent.atomic.AtomicBoolean;
import org.jline.terminal.Size;
import org.jline.terminal.Terminal;
import org.jline.utils.AttributedString;
import org.jline.utils.Display;
import org.jline.utils.InfoCmp.Capability;
import org.jline.utils.Signals;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Drill;
import steelyard.harness.record.PlayBoard;

/**
 * A view that redraws itself in place, below what the terminal showed before, so that its last state stays there. Only
 * lines that changed are written.
 *
 * <p>Where a terminal was made narrower its lines may have been wrapped by it, and nobody can know how; then the screen
 * is cleared once.
 */
final class TerminalView implements View {
    private static final long TICK_MILLIS = 200;
    private static final int COLOURS_NEEDED = 256;

    private final Drill drill;
    private final PlayBoard board;
    private final Terminal terminal;
    private final Colours colours;
    private final Display display;
    private final Ticker ticker = new Ticker(this::show);
    private final AtomicBoolean closed = new AtomicBoolean();
    private volatile boolean resized;
    private Size size;

    TerminalView(Drill drill, PlayBoard board, Terminal terminal) {
        this.drill = drill;
        this.board = board;
        this.terminal = terminal;
        Integer colourCount = terminal.getNumericCapability(Capability.max_colors);
        colours = Colours.of(colourCount != null && colourCount >= COLOURS_NEEDED, System.getenv("NO_COLOR") != null);
        display = new Display(terminal, false);
        size = terminal.getSize();
        display.resize(size.getRows(), size.getColumns());
    }

    /** A view on the terminal behind standard output, or null where there is none, or none that can redraw. */
    static @Nullable TerminalView on(Drill drill, PlayBoard board) {
        Terminal terminal = Terminals.redrawing();
        return terminal == null ? null : new TerminalView(drill, board, terminal);
    }

    @Override
    public void begin() {
        Signals.register("WINCH", () -> resized = true);
        terminal.echo(false); // a key pressed would move what is drawn
        terminal.puts(Capability.cursor_invisible);
        ticker.start(TICK_MILLIS);
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
        if (resized) {
            resized = false;
            size = terminal.getSize();
            terminal.puts(Capability.clear_screen);
            display.reset();
            display.resize(size.getRows(), size.getColumns());
        }
        // The last column stays free: what a terminal does after writing it differs.
        SceneLines layout = new SceneLines(size.getColumns() - 1, size.getRows() - 1, colours);
        List<AttributedString> lines = layout.of(Scene.of(drill, board.now()));
        display.update(lines, endOf(lines));
    }

    /** The cursor rests after the last line, so that whatever is printed next stands below. */
    private int endOf(List<AttributedString> lines) {
        int last = lines.size() - 1;
        return size.cursorPos(last, lines.get(last).columnLength());
    }
}
