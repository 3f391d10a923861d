package steelyard.harness.report;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.function.Function;
import steelyard.harness.tune.Choice;
import steelyard.harness.tune.Front.Mark;
import steelyard.harness.tune.Result;
import steelyard.harness.tune.Result.Axis;
import steelyard.harness.tune.Tuning.Tuned;

/**
 * What is wanted over what it costs, a point a cell: once for wide pages and once for narrow ones. A measure whose best
 * side is a middle is drawn as its distance from there.
 */
final class TuneChart {
    private static final int LEFT = 64;
    private static final int RIGHT = 16;
    private static final int TOP = 14;
    private static final int BOTTOM = 44;
    private static final int LETTER = 7;
    private static final int LINE = 14;

    private final Tuned tuned;
    private final Choice choice;
    private final StringBuilder out = new StringBuilder();
    private final List<Box> taken = new ArrayList<>();

    private int width;
    private int height;
    private Ticks across = Ticks.of(0, 1);
    private Ticks up = Ticks.of(0, 1);

    private record Box(double x, double y, double width, double height) {
        boolean meets(Box other) {
            return x < other.x + other.width
                    && other.x < x + width
                    && y < other.y + other.height
                    && other.y < y + height;
        }
    }

    TuneChart(Tuned tuned, Choice choice) {
        this.tuned = tuned;
        this.choice = choice;
    }

    String svg() {
        List<Result> drawn = tuned.results().stream().filter(TuneChart::drawn).toList();
        if (drawn.isEmpty()) {
            return "<p>No cell has values of both measures, so there is nothing to draw.</p>\n";
        }
        across = Ticks.of(
                drawn.stream().mapToDouble(each -> shown(each.against())).toArray());
        up = Ticks.of(drawn.stream().mapToDouble(each -> shown(each.want())).toArray());
        draw("on-wide", 860, 460);
        draw("on-narrow", 362, 360);
        int left = tuned.results().size() - drawn.size();
        if (left > 0) {
            out.append("<p class=\"hint\">Not drawn, since no play has a value: ")
                    .append(left)
                    .append(" of the cells.</p>\n");
        }
        return out.toString();
    }

    private static double shown(Axis axis) {
        return Shown.of(axis).value();
    }

    private void draw(String when, int wide, int high) {
        width = wide;
        height = high;
        taken.clear();
        out.append(String.format(
                Locale.ROOT,
                "<svg class=\"tune %s\" viewBox=\"0 0 %d %d\" role=\"img\" aria-label=\"%s over %s, a point a cell; the"
                        + " table below holds the figures\">\n",
                when,
                width,
                height,
                Html.text(words(Result::want)),
                Html.text(words(Result::against))));
        grid();
        front();
        points();
        out.append("</svg>\n");
    }

    private String words(Function<Result, Axis> axis) {
        return Shown.of(axis.apply(tuned.results().get(0))).words();
    }

    private void grid() {
        Shown x = Shown.of(tuned.results().get(0).against());
        Shown y = Shown.of(tuned.results().get(0).want());
        for (double tick : across.list()) {
            double at = x(tick);
            line("hair", at, TOP, at, height - BOTTOM);
            text("soft", at, height - BOTTOM + 16, "middle", x.words(tick));
        }
        for (double tick : up.list()) {
            double at = y(tick);
            line("hair", LEFT, at, width - RIGHT, at);
            text("soft", LEFT - 6, at + 4, "end", y.words(tick));
        }
        line("axis", LEFT, height - BOTTOM, width - RIGHT, height - BOTTOM);
        text("name", width - RIGHT, height - 6, "end", x.words());
        text("name", 0, 11, "start", y.words());
    }

    /** A line between the cells that no other beats. */
    private void front() {
        List<Result> open = marked(Mark.NON_DOMINATED);
        open.sort((one, other) -> Double.compare(shown(one.against()), shown(other.against())));
        StringBuilder path = new StringBuilder();
        for (Result each : open) {
            path.append(String.format(Locale.ROOT, "%s%.1f,%.1f", path.length() == 0 ? "M" : " L", x(each), y(each)));
        }
        if (open.size() > 1) {
            out.append("<path class=\"front\" d=\"").append(path).append("\"/>\n");
        }
    }

    private List<Result> marked(Mark mark) {
        List<Result> marked = new ArrayList<>();
        for (int at = 0; at < tuned.results().size(); at++) {
            Result each = tuned.results().get(at);
            if (tuned.marks().get(at) == mark && drawn(each)) {
                marked.add(each);
            }
        }
        return marked;
    }

    private static boolean drawn(Result each) {
        return Double.isFinite(each.want().cost())
                && Double.isFinite(each.against().cost());
    }

    private void points() {
        for (Mark mark : new Mark[] {Mark.DOMINATED, Mark.BY_CHANCE, Mark.NON_DOMINATED}) {
            for (Result each : marked(mark)) {
                point(each, mark);
            }
        }
        choice.taken().filter(TuneChart::drawn).ifPresent(each -> label(each, "Take " + values(each), "name"));
        for (Result each : marked(Mark.NON_DOMINATED)) {
            if (choice.taken().filter(each::equals).isEmpty()) {
                label(each, each.cell().number() + ": " + values(each), "label");
            }
        }
    }

    private static String values(Result each) {
        return String.join(" · ", each.cell().values().values());
    }

    private void point(Result each, Mark mark) {
        boolean chosen = choice.taken().filter(each::equals).isPresent();
        String kind = mark == Mark.NON_DOMINATED ? "open" : mark == Mark.BY_CHANCE ? "chance" : "beaten";
        if (chosen) {
            out.append(String.format(
                    Locale.ROOT, "<circle class=\"taken\" cx=\"%.1f\" cy=\"%.1f\" r=\"9\"/>\n", x(each), y(each)));
        }
        out.append(String.format(
                Locale.ROOT,
                "<circle class=\"%s\" cx=\"%.1f\" cy=\"%.1f\" r=\"%s\"><title>%s</title></circle>\n",
                kind,
                x(each),
                y(each),
                mark == Mark.NON_DOMINATED ? "5" : "4",
                Html.text("cell " + each.cell().number() + ": " + each.cell().words())));
        taken.add(new Box(x(each) - 6, y(each) - 6, 12, 12));
    }

    /** Beside its point where there is room; a label without room is left to the table. */
    private void label(Result each, String words, String kind) {
        double wide = words.length() * LETTER;
        double[][] places = {
            {12, -LINE}, {12, 4}, {-12 - wide, -LINE}, {-12 - wide, 4}, {-wide / 2, -26}, {-wide / 2, 12}
        };
        for (double[] place : places) {
            Box box = new Box(x(each) + place[0], y(each) + place[1], wide, LINE);
            boolean inside =
                    box.x >= LEFT && box.x + wide <= width && box.y >= TOP + 2 && box.y + LINE <= height - BOTTOM;
            if (inside && taken.stream().noneMatch(box::meets)) {
                taken.add(box);
                text(kind, box.x, box.y + 11, "start", words);
                return;
            }
        }
    }

    private double x(Result each) {
        return x(shown(each.against()));
    }

    private double y(Result each) {
        return y(shown(each.want()));
    }

    private double x(double value) {
        return LEFT + across.part(value) * (width - LEFT - RIGHT);
    }

    private double y(double value) {
        return height - BOTTOM - up.part(value) * (height - TOP - BOTTOM - 8);
    }

    private void line(String kind, double fromX, double fromY, double toX, double toY) {
        out.append(String.format(
                Locale.ROOT,
                "<line class=\"%s\" x1=\"%.1f\" y1=\"%.1f\" x2=\"%.1f\" y2=\"%.1f\"/>\n",
                kind,
                fromX,
                fromY,
                toX,
                toY));
    }

    private void text(String kind, double atX, double atY, String anchor, String words) {
        out.append(String.format(
                Locale.ROOT,
                "<text class=\"%s\" x=\"%.1f\" y=\"%.1f\" text-anchor=\"%s\">%s</text>\n",
                kind,
                atX,
                atY,
                anchor,
                Html.text(words)));
    }
}
