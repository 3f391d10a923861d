package steelyard.harness.cli;

import java.util.ArrayList;
import java.util.List;
import java.util.regex.Pattern;

/**
 * Rows under a head: the first column and the one without a head, which is the outcome, to the left, the others to the
 * right.
 */
final class TextTable {
    private static final String GAP = "  ";
    /** Says nothing by itself where its head does not stand above it. */
    private static final Pattern NUMBER = Pattern.compile("\\d+");

    private TextTable() {}

    /** @param width a table wider than that is written one row after the other, a cell a line */
    static List<String> lines(List<String> head, List<List<String>> rows, int width) {
        List<List<String>> all = new ArrayList<>();
        all.add(head);
        all.addAll(rows);
        int[] widths = new int[head.size()];
        for (List<String> row : all) {
            for (int column = 0; column < widths.length; column++) {
                widths[column] = Math.max(widths[column], row.get(column).length());
            }
        }
        List<String> lines = all.stream().map(row -> line(head, row, widths)).toList();
        boolean fits = lines.stream().allMatch(line -> line.length() <= width);
        return fits ? lines : stacked(head, rows, width);
    }

    private static String line(List<String> head, List<String> row, int[] widths) {
        StringBuilder line = new StringBuilder();
        for (int column = 0; column < widths.length; column++) {
            boolean right = column > 0 && !head.get(column).isEmpty();
            line.append(VerdictText.pad(row.get(column), widths[column], right)).append(GAP);
        }
        return line.toString().stripTrailing();
    }

    private static List<String> stacked(List<String> head, List<List<String>> rows, int width) {
        int widest = head.stream().skip(1).mapToInt(String::length).max().orElse(0);
        List<String> lines = new ArrayList<>();
        for (List<String> row : rows) {
            String outcome = head.indexOf("") < 0 ? "" : row.get(head.indexOf(""));
            String name = NUMBER.matcher(row.get(0)).matches() ? head.get(0) + " " + row.get(0) : row.get(0);
            lines.addAll(VerdictText.wrapped("", outcome.isEmpty() ? name : outcome + ": " + name, width));
            for (int column = 1; column < head.size(); column++) {
                if (!head.get(column).isEmpty() && !row.get(column).isEmpty()) {
                    lines.add(GAP + VerdictText.pad(head.get(column), widest, false) + GAP + row.get(column));
                }
            }
        }
        return lines;
    }
}
