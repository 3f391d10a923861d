package steelyard.harness.console;

import java.util.ArrayList;
import java.util.List;
import java.util.function.Function;
import org.jline.utils.AttributedString;
import org.jline.utils.AttributedStringBuilder;
import org.jline.utils.AttributedStyle;
import steelyard.harness.record.PlayBoard.BackendFigures;
import steelyard.harness.record.Words;

/** The table of backends: as many of its columns as fit, the name always first. */
final class BackendColumns {
    private static final int NAME_LEAST = 7;
    private static final int NAME_MOST = 24;
    private static final Column STANDING = new Column("standing", 9, false, each -> Words.of(each.standing()));
    private static final Column SHARE = new Column("share", 6, true, each -> Figures.share(each.share()));
    private static final Column IN_FLIGHT = new Column("in flight", 9, true, each -> Figures.count(each.inFlight()));
    private static final Column WEIGHT = new Column("weight", 6, true, each -> Figures.weight(each.effectiveWeight()));
    private static final Column POOL = new Column("pool", 12, false, BackendFigures::pool);

    private final int nameWidth;
    private final List<Column> columns;

    private BackendColumns(int nameWidth, List<Column> columns) {
        this.nameWidth = nameWidth;
        this.columns = columns;
    }

    /** The columns that fit: standing before share, in flight, weight and, where there are several, the pool. */
    static BackendColumns fitting(List<BackendFigures> backends, int width) {
        int longest = backends.stream()
                .mapToInt(each -> new AttributedString(each.name()).columnLength())
                .max()
                .orElse(NAME_LEAST);
        int name = Math.max(NAME_LEAST, Math.min(NAME_MOST, longest));
        List<Column> fitting = new ArrayList<>(List.of(STANDING, SHARE, IN_FLIGHT, WEIGHT));
        if (backends.stream().map(BackendFigures::pool).distinct().count() > 1) {
            fitting.add(POOL);
        }
        while (!fitting.isEmpty() && total(name, fitting) > width) {
            fitting.remove(fitting.size() - 1);
        }
        List<Column> shown = new ArrayList<>(List.of(POOL, STANDING, WEIGHT, SHARE, IN_FLIGHT));
        shown.retainAll(fitting);
        return new BackendColumns(Math.min(name, width), shown);
    }

    private static int total(int name, List<Column> columns) {
        return name + columns.stream().mapToInt(column -> column.width + 2).sum();
    }

    String head() {
        StringBuilder head = new StringBuilder(SceneLines.pad("backend", nameWidth, false));
        columns.forEach(column -> head.append("  ").append(SceneLines.pad(column.head, column.width, column.right)));
        return head.toString();
    }

    AttributedString row(BackendFigures backend, AttributedStyle nameStyle) {
        AttributedStringBuilder row = new AttributedStringBuilder();
        row.styled(nameStyle, SceneLines.pad(backend.name(), nameWidth, false));
        for (Column column : columns) {
            row.append("  ").append(SceneLines.pad(column.text.apply(backend), column.width, column.right));
        }
        return row.toAttributedString();
    }

    private record Column(String head, int width, boolean right, Function<BackendFigures, String> text) {}
}
