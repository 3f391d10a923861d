package steelyard.harness.console;

import java.io.PrintWriter;
import org.jline.terminal.Terminal;

/** Shows how far something countable has come: {@link #open}, {@link #begin}, {@link #at} ..., {@link #close}. */
public interface Progress extends AutoCloseable {
    /**
     * A bar with the time left where standard output is a terminal that can redraw, a line each tenth elsewhere.
     *
     * @param title said once
     * @param noun what is counted, for more than one: {@code plays}
     * @param total how many there will be, at least 1
     * @param plain asks for plain lines on a terminal too
     * @param err where plain lines go
     */
    static Progress open(String title, String noun, long total, boolean plain, PrintWriter err) {
        Terminal terminal = plain ? null : Terminals.redrawing();
        return terminal == null
                ? new PlainProgress(title, noun, total, err)
                : new ProgressBar(title, noun, total, terminal);
    }

    void begin();

    /** So many are done. One thread. */
    void at(long done);

    /** Columns that what is printed afterwards may take. */
    int width();

    /** Leaves the terminal as it was. Any thread; again does no harm. */
    @Override
    void close();
}
