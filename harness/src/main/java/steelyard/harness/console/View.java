package steelyard.harness.console;

import java.io.PrintWriter;
import steelyard.drills.model.Drill;
import steelyard.harness.record.PlayBoard;
import steelyard.harness.record.PlayListener;

/**
 * Shows a play while it runs: {@link #open}, {@link #begin}, {@link #close}. It is a listener beside the board, so that
 * it can tell of every cue and every change of a standing; it only notes them and never waits.
 */
public interface View extends PlayListener, AutoCloseable {
    /**
     * The view that fits: one that redraws itself where standard output is a terminal that can, plain lines elsewhere.
     *
     * @param board is read by the view's own thread
     * @param plain asks for plain lines on a terminal too
     * @param out where plain lines go
     */
    static View open(Drill drill, PlayBoard board, boolean plain, PrintWriter out) {
        TerminalView onTerminal = plain ? null : TerminalView.on(drill, board);
        return onTerminal == null ? new PlainView(drill, board, out) : onTerminal;
    }

    /** Begins to show the play. */
    void begin();

    /** Columns that what is printed after the play may take. */
    int width();

    /** Shows the play as it is and leaves the terminal as it was. Any thread; again does no harm. */
    @Override
    void close();
}
