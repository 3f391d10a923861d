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

    private final String file;
    private final @Nullable String column;
    private int found;

    /** With the name of the file as the drill writes it, and the column that it asks for, or null for the first one. */
    TraceText(String file, @Nullable String column) {
        this.file = file;
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
                nanos[count] = time(lines[line], line + 1, place, asked);
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

    private long time(String line, int number, int place, Fields asked) {
        List<String> cells = cells(line);
        String cell = place < cells.size() ? cells.get(place) : "";
        Long nanos = cell.isEmpty() ? null : Durations.nanos(cell);
        if (nanos != null && nanos > 0 && nanos <= Durations.DAY) {
            return nanos;
        }
        found++;
        String quoted = Quantity.quoted(cell);
        if (cell.isEmpty()) {
            refuse(asked, number, "there is no time", "write one, such as 12ms, or drop the line");
        } else if (nanos != null) {
            refuse(asked, number, quoted + " is not above zero, up to a day", "drop the line");
        } else {
            String wrong = Numbers.isNumber(cell) ? " has no unit" : " is not a duration";
            refuse(asked, number, quoted + wrong, Durations.POSITIVE.remedy(cell));
        }
        return 0;
    }

    private void refuse(Fields asked, int line, String message, String remedy) {
        asked.problems()
                .add(
                        asked.valuePlace("trace"),
                        "'trace' cannot be taken: " + file + ", line " + line + ": " + message,
                        remedy);
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
}
