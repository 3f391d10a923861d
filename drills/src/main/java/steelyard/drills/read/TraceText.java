package steelyard.drills.read;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Trace;

/** Reads the text of one file of recorded service times. */
final class TraceText {
    /** More lines of problems than that help nobody. */
    private static final int MOST_PROBLEMS = 10;

    private final Problems.Elsewhere problems;
    private final @Nullable String column;
    private int found;

    TraceText(Problems.Elsewhere problems, @Nullable String column) {
        this.problems = problems;
        this.column = column;
    }

    /** The times, or null when a problem was noted; {@code asked} is where the drill names file and column. */
    Trace.@Nullable Nanos read(String text, Fields asked) {
        String[] lines = text.split("\n", -1);
        int first = 0;
        while (first < lines.length && lines[first].isBlank()) {
            first++;
        }
        if (first == lines.length) {
            asked.problems().add(asked.valuePlace("trace"), "the trace holds no time", "write one duration a line");
            return null;
        }
        List<String> heads = cells(lines[first]);
        int place = column == null ? 0 : heads.indexOf(column);
        if (place < 0) {
            asked.problems()
                    .add(
                            asked.valuePlace("column"),
                            "the trace has no column " + Quantity.quoted(column == null ? "" : column),
                            NearWord.remedy(column == null ? "" : column, heads, "it has " + Sentence.and(heads)));
            return null;
        }
        boolean headed = column != null || looksLikeHead(heads.get(0));
        return times(lines, headed ? first + 1 : first, place, asked);
    }

    private Trace.@Nullable Nanos times(String[] lines, int from, int place, Fields asked) {
        long[] nanos = new long[lines.length - from];
        int count = 0;
        for (int line = from; line < lines.length && found < MOST_PROBLEMS; line++) {
            if (!lines[line].isBlank()) {
                nanos[count] = time(lines[line], line + 1, place);
                count++;
            }
        }
        if (found == 0 && count == 0) {
            asked.problems()
                    .add(asked.valuePlace("trace"), "the trace holds no time below its head", "write one a line");
            return null;
        }
        return found > 0 ? null : Trace.Nanos.of(Arrays.copyOf(nanos, count));
    }

    private long time(String line, int number, int place) {
        List<String> cells = cells(line);
        String cell = place < cells.size() ? cells.get(place) : "";
        Place at = new Place(number, column(line, place));
        Long nanos = cell.isEmpty() ? null : Durations.nanos(cell);
        if (nanos != null && nanos > 0 && nanos <= Durations.DAY) {
            return nanos;
        }
        found++;
        if (cell.isEmpty()) {
            problems.add(at, "the line has no time", "write one, such as 12ms, or drop the line");
        } else if (nanos == null && Numbers.isNumber(cell)) {
            problems.add(
                    at,
                    Quantity.quoted(cell) + " has no unit",
                    "write " + cell + "ms, " + cell + "s or " + cell + "us");
        } else if (nanos == null) {
            problems.add(at, Quantity.quoted(cell) + " is not a duration", "write it like 15s, 250ms or 1.5s");
        } else {
            problems.add(at, Quantity.quoted(cell) + " is not above zero, up to a day", "drop the line");
        }
        return 0;
    }

    /** A head is a word: it does not begin like a number. */
    private static boolean looksLikeHead(String cell) {
        return !cell.isEmpty() && !Instant.looksLikeNumber(cell) && cell.charAt(0) != '-' && cell.charAt(0) != '+';
    }

    private static List<String> cells(String line) {
        List<String> cells = new ArrayList<>();
        for (String cell : line.split(",", -1)) {
            String bare = cell.strip();
            boolean quoted = bare.length() > 1 && bare.startsWith("\"") && bare.endsWith("\"");
            cells.add(quoted ? bare.substring(1, bare.length() - 1) : bare);
        }
        return cells;
    }

    /** The column of the text, from 1, at which a cell begins. */
    private static int column(String line, int place) {
        int at = 0;
        for (int i = 0; i < place && line.indexOf(',', at) >= 0; i++) {
            at = line.indexOf(',', at) + 1;
        }
        return at + 1;
    }
}
