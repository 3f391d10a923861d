package steelyard.harness.console;

import java.io.IOException;
import org.jline.terminal.Size;
import org.jline.terminal.Terminal;
import org.jline.terminal.TerminalBuilder;
import org.jline.utils.InfoCmp.Capability;
import org.jspecify.annotations.Nullable;

/** The terminal behind standard output. */
public final class Terminals {
    private static final int LEAST_WIDTH = 20;
    private static final int LEAST_HEIGHT = 6;

    private Terminals() {}

    /** Columns of the terminal, or what is given where there is none. */
    public static int width(int otherwise) {
        try (Terminal terminal = redrawing()) {
            return terminal == null ? otherwise : terminal.getSize().getColumns();
        } catch (IOException broken) {
            return otherwise;
        }
    }

    /** A terminal on which lines can be drawn again, or null where there is none; the caller closes it. */
    static @Nullable Terminal redrawing() {
        try {
            // The process has handlers of its own for signals, so the terminal must not set any.
            Terminal terminal = TerminalBuilder.builder()
                    .system(true)
                    .systemOutput(TerminalBuilder.SystemOutput.SysOut)
                    .dumb(false)
                    .nativeSignals(false)
                    .build();
            Size size = terminal.getSize();
            boolean can = terminal.getStringCapability(Capability.cursor_up) != null
                    && size.getColumns() >= LEAST_WIDTH
                    && size.getRows() >= LEAST_HEIGHT;
            if (can) {
                return terminal;
            }
            terminal.close();
            return null;
        } catch (IOException | IllegalStateException none) {
            return null;
        }
    }
}
