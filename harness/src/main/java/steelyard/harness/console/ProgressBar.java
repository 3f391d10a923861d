package steelyard.harness.console;

import java.util.List;
import org.jline.terminal.Terminal;
import org.jline.utils.AttributedString;

/** A bar that is drawn again in place; its last state stays. Time is counted in its own ticks. */
final class ProgressBar implements Progress {
    private final String title;
    private final String noun;
    private final long total;
    private final DrawnLines lines;
    private volatile long done;
    private long ticks;

    ProgressBar(String title, String noun, long total, Terminal terminal) {
        this.title = title;
        this.noun = noun;
        this.total = total;
        lines = new DrawnLines(terminal, this::show);
    }

    @Override
    public void begin() {
        lines.begin();
    }

    @Override
    public void at(long now) {
        done = now;
    }

    @Override
    public int width() {
        return lines.size().getColumns();
    }

    @Override
    public void close() {
        lines.close();
    }

    private void show() {
        // The last column stays free: what a terminal does after writing it differs.
        int width = lines.size().getColumns() - 1;
        AttributedString first =
                new AttributedString(SceneLines.pad(title, width, false).stripTrailing());
        AttributedString bar = new AttributedString(line(done, total, noun, ticks * DrawnLines.TICK_MILLIS, width));
        ticks++;
        lines.update(List.of(first, bar));
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
