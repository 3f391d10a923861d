package steelyard.harness.console;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import java.util.stream.Collectors;
import org.jline.utils.AttributedString;
import org.jline.utils.AttributedStringBuilder;
import org.jline.utils.AttributedStyle;
import steelyard.harness.record.PlayBoard;
import steelyard.harness.record.PlayBoard.BackendFigures;
import steelyard.harness.record.Words;

/**
 * Lays a scene out in lines of a terminal, in the order of the report: how far, what happened, how it goes, who serves.
 *
 * <p>No line is wider than the width and there are never more lines than the height, whatever they are: what does not
 * fit is left out, last things first.
 */
final class SceneLines {
    private static final int TITLE_LINE = 0;
    private static final int PLAYED_LINE = 2;
    private static final int NOW_LINE = 3;
    private static final int NEXT_LINE = 4;
    private static final int BAR_MOST = 40;
    private static final int BAR_LEAST = 8;
    private static final String HINT = "Ctrl-C ends the play and writes the run.";

    private final int width;
    private final int height;
    private final Colours colours;

    /**
     * @param width columns that may be used; at least one is
     * @param height lines that may be used; at least one is
     */
    SceneLines(int width, int height, Colours colours) {
        this.width = Math.max(1, width);
        this.height = Math.max(1, height);
        this.colours = colours;
    }

    List<AttributedString> of(Scene scene) {
        PlayBoard.Figures figures = scene.figures();
        List<AttributedString> lines = new ArrayList<>();
        lines.add(plain(scene.title()));
        lines.add(progress(scene));
        PlayBoard.Played played = figures.lastCue();
        lines.add(cue("played", played == null ? "" : at(played.atNanos(), Scene.text(played.cue(), played.by()))));
        lines.add(cue("now", inForce(scene)));
        lines.add(cue(
                "next",
                scene.next() == null
                        ? ""
                        : at(scene.next().atNanos(), scene.next().text())));
        lines.add(plain("rate    " + rate(scene)));
        lines.add(failures(figures));
        if (height - lines.size() >= 2) {
            backends(figures.backends(), lines);
        } else {
            makeRoom(lines);
            lines.add(plain(figures.backends().size() + " backends: " + standings(figures.backends())));
        }
        if (height - lines.size() >= 2 && !figures.ended()) {
            lines.add(plain(""));
            lines.add(plain(HINT));
        }
        return List.copyOf(lines.subList(0, Math.min(lines.size(), height)));
    }

    private static String rate(Scene scene) {
        PlayBoard.Figures figures = scene.figures();
        return Figures.traffic(figures, scene.lastsNanos()) + ", " + Figures.count(figures.good()) + " good so far"
                + Figures.balancer(figures);
    }

    /** On a very low terminal a line about the backends is worth more than what is next, goes on or was played. */
    private void makeRoom(List<AttributedString> lines) {
        for (int line : new int[] {NEXT_LINE, NOW_LINE, PLAYED_LINE, TITLE_LINE}) {
            if (lines.size() >= height) {
                lines.remove(line);
            }
        }
    }

    private static String inForce(Scene scene) {
        return scene.inForce().stream().map(Scene::text).collect(Collectors.joining("; "));
    }

    /** The last answers come a little after the end; they are no more of the play than there is. */
    private AttributedString progress(Scene scene) {
        long at = Math.min(scene.figures().atNanos(), scene.lastsNanos());
        String text = Figures.seconds(at) + " of " + Figures.seconds(scene.lastsNanos());
        int bar = Math.min(BAR_MOST, width - text.length() - 4);
        if (bar >= BAR_LEAST) {
            int full = (int) (bar * Math.min(1, (double) at / scene.lastsNanos()));
            text += "  [" + "=".repeat(full) + " ".repeat(bar - full) + "]";
        }
        return plain(text);
    }

    private static String at(long nanos, String text) {
        return Figures.seconds(nanos) + "  " + text;
    }

    private AttributedString cue(String head, String text) {
        return plain(pad(head, 8, false) + (text.isEmpty() ? "none" : text));
    }

    private AttributedString failures(PlayBoard.Figures figures) {
        AttributedStringBuilder line = new AttributedStringBuilder().append("failed  ");
        if (figures.failed() == 0) {
            return cut(line.append("0").toAttributedString());
        }
        double share = (double) figures.failed() / (figures.failed() + figures.good());
        line.styled(colours.failure(), Figures.count(figures.failed()) + " (" + Figures.exactShare(share) + ")");
        line.append("  ").append(Figures.causes(figures.failedBy()));
        return cut(line.toAttributedString());
    }

    private void backends(List<BackendFigures> backends, List<AttributedString> lines) {
        BackendColumns columns = BackendColumns.fitting(backends, width);
        if (height - lines.size() >= backends.size() + 2) {
            lines.add(plain(""));
        }
        lines.add(plain(columns.head()));
        int free = height - lines.size();
        int shown = backends.size() <= free ? backends.size() : Math.max(0, free - 1);
        for (int backend = 0; backend < shown; backend++) {
            AttributedStyle style = colours.backend(backend);
            lines.add(cut(columns.row(backends.get(backend), style)));
        }
        if (shown < backends.size()) {
            List<BackendFigures> hidden = backends.subList(shown, backends.size());
            lines.add(plain("and " + hidden.size() + " more: " + standings(hidden)));
        }
    }

    private static String standings(List<BackendFigures> hidden) {
        Map<String, Long> byStanding = hidden.stream()
                .collect(Collectors.groupingBy(each -> Words.of(each.standing()), TreeMap::new, Collectors.counting()));
        return byStanding.entrySet().stream()
                .map(each -> each.getValue() + " " + each.getKey())
                .collect(Collectors.joining(", "));
    }

    private AttributedString plain(String text) {
        return cut(new AttributedString(text));
    }

    /** A cut is shown by a tilde in the last column. */
    private AttributedString cut(AttributedString line) {
        if (line.columnLength() <= width) {
            return line;
        }
        return new AttributedStringBuilder()
                .append(line.columnSubSequence(0, width - 1))
                .append("~")
                .toAttributedString();
    }

    /** A text in exactly that many columns, cut where it is longer. */
    static String pad(String text, int columns, boolean right) {
        AttributedString measured = new AttributedString(text);
        int missing = columns - measured.columnLength();
        if (missing < 0) {
            return measured.columnSubSequence(0, Math.max(0, columns - 1)) + "~";
        }
        return right ? " ".repeat(missing) + text : text + " ".repeat(missing);
    }
}
