package steelyard.harness.console;

import java.io.PrintWriter;

/** A line for each tenth. */
final class PlainProgress implements Progress {
    private static final int PARTS = 10;

    private final String title;
    private final String noun;
    private final long total;
    private final PrintWriter out;
    private long shown;

    PlainProgress(String title, String noun, long total, PrintWriter out) {
        this.title = title;
        this.noun = noun;
        this.total = total;
        this.out = out;
    }

    @Override
    public void begin() {
        out.println(title);
        out.flush();
    }

    @Override
    public void at(long done) {
        long part = done * PARTS / total;
        if (part > shown) {
            shown = part;
            out.println(Figures.count(done) + " of " + Figures.count(total) + " " + noun);
            out.flush();
        }
    }

    @Override
    public int width() {
        return Integer.MAX_VALUE;
    }

    @Override
    public void close() {
        out.flush();
    }
}
