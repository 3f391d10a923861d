package steelyard.harness.console;

import org.jline.terminal.Size;
import org.jline.terminal.Terminal;
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
    private static final int COLOURS_NEEDED = 256;

    private final Drill drill;
    private final PlayBoard board;
    private final Colours colours;
    private final DrawnLines drawn;
    private volatile boolean resized;

    TerminalView(Drill drill, PlayBoard board, Terminal terminal) {
        this.drill = drill;
        this.board = board;
        Integer colourCount = terminal.getNumericCapability(Capability.max_colors);
        colours = Colours.of(colourCount != null && colourCount >= COLOURS_NEEDED, System.getenv("NO_COLOR") != null);
        drawn = new DrawnLines(terminal, this::show);
    }

    /** A view on the terminal behind standard output, or null where there is none, or none that can redraw. */
    static @Nullable TerminalView on(Drill drill, PlayBoard board) {
        Terminal terminal = Terminals.redrawing();
        return terminal == null ? null : new TerminalView(drill, board, terminal);
    }

    @Override
    public void begin() {
        Signals.register("WINCH", () -> resized = true);
        drawn.begin();
    }

    @Override
    public int width() {
        return drawn.size().getColumns();
    }

    @Override
    public void close() {
        drawn.close();
    }

    private void show() {
        if (resized) {
            resized = false;
            drawn.measure();
        }
        // The last column stays free: what a terminal does after writing it differs.
        Size size = drawn.size();
        SceneLines layout = new SceneLines(size.getColumns() - 1, size.getRows() - 1, colours);
        drawn.update(layout.of(Scene.of(drill, board.now())));
    }
}
