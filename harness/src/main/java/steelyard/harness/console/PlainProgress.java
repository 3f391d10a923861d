package steelyard.harness.console;

import java.io.PrintWriter;

/** A line for each tenth. */
final class PlainProgress implements Progress {
    private static final int PARTS = 10;

    private final String title;
    private final String noun;
    private final long total;
    private final PrintWriter err;
    private long shown;

    PlainProgress(String title, String noun, long total, PrintWriter err) {
        this.title = title;
        this.noun = noun;
        this.total = total;
        this.err = err;
    }

    @Override
    public void begin() {
        err.println(title);
        err.flush();
    }

    @Override
    public void at(long done) {
        long part = done * PARTS / total;
        if (part > shown) {
            shown = part;
            err.println(Figures.count(done) + " of " + Figures.count(total) + " " + noun);
            err.flush();
        }
    }

    @Override
    public int width() {
        return Integer.MAX_VALUE;
    }

    @Override
    public void close() {
        err.flush();
    }
}
