package steelyard.harness.cli;

import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.harness.record.Finding;
import steelyard.harness.record.Verdict;

/** A verdict as a person reads it, from the top: in a sentence, each expectation beside its bound, why it is unfit. */
final class VerdictText {
    private static final String[] HEAD = {"expectation", "bound", "measured", "margin", ""};
    private static final String GAP = "  ";

    private VerdictText() {}

    /**
     * Lines of a verdict.
     *
     * @param width a table wider than that is written one expectation after the other
     */
    static List<String> lines(Verdict verdict, int width) {
        List<String> lines = new ArrayList<>();
        lines.addAll(wrapped("", verdict.text(), width));
        lines.addAll(UnfitText.lines(verdict.text(), verdict.checks(), width));
        if (!verdict.expectations().isEmpty()) {
            lines.add("");
            List<String[]> rows = verdict.expectations().stream()
                    .map(finding -> cells(finding, verdict.fit()))
                    .toList();
            List<String> table = table(rows);
            boolean fits = table.stream().allMatch(line -> line.length() <= width);
            lines.addAll(fits ? table : stacked(verdict.expectations(), rows, width));
            if (fits) {
                lines.addAll(notes(verdict.expectations(), width));
            }
            if (verdict.fit()) {
                lines.add(sum(verdict.expectations()));
            }
        }
        return lines;
    }

    private static String sum(List<Finding> findings) {
        long met = findings.stream().filter(Finding::met).count();
        return met + " of " + findings.size() + " met";
    }

    private static List<String> table(List<String[]> findings) {
        List<String[]> rows = new ArrayList<>();
        rows.add(HEAD);
        rows.addAll(findings);
        int[] widths = new int[HEAD.length];
        for (String[] row : rows) {
            for (int column = 0; column < row.length; column++) {
                widths[column] = Math.max(widths[column], row[column].length());
            }
        }
        List<String> lines = new ArrayList<>();
        for (String[] row : rows) {
            StringBuilder line = new StringBuilder();
            for (int column = 0; column < row.length; column++) {
                boolean number = column >= 1 && column <= 3;
                line.append(pad(row[column], widths[column], number)).append(GAP);
            }
            lines.add(line.toString().stripTrailing());
        }
        return lines;
    }

    private static List<String> notes(List<Finding> findings, int width) {
        return findings.stream()
                .filter(finding -> finding.note() != null)
                .flatMap(finding -> wrapped("", "note on " + finding.text() + ": " + finding.note(), width).stream())
                .toList();
    }

    private static List<String> stacked(List<Finding> findings, List<String[]> rows, int width) {
        List<String> lines = new ArrayList<>();
        for (int row = 0; row < rows.size(); row++) {
            Finding finding = findings.get(row);
            String[] cells = rows.get(row);
            lines.addAll(wrapped("", cells[4] + ": " + cells[0], width));
            for (int column = 1; column <= 3; column++) {
                if (!cells[column].isEmpty()) {
                    lines.add(GAP + pad(HEAD[column], 8, false) + GAP + cells[column]);
                }
            }
            if (finding.note() != null) {
                lines.addAll(wrapped(GAP, pad("note", 8, false) + GAP + finding.note(), width));
            }
        }
        return lines;
    }

    /** Breaks a line between words; lines after the first are set in. */
    static List<String> wrapped(String gap, String text, int width) {
        List<String> lines = new ArrayList<>();
        String rest = gap + text;
        while (rest.length() > width) {
            int blank = rest.lastIndexOf(' ', width);
            if (blank <= gap.length() + GAP.length()) {
                break; // one word too long for a line is left to the terminal
            }
            lines.add(rest.substring(0, blank).stripTrailing());
            rest = gap + GAP + rest.substring(blank + 1).stripLeading();
        }
        lines.add(rest);
        return lines;
    }

    /** What an unfit play came to stands in brackets, since it is no verdict. */
    private static String[] cells(Finding finding, boolean fit) {
        return new String[] {
            finding.text(),
            orEmpty(finding.boundText()),
            finding.measured(),
            orEmpty(finding.marginText()),
            fit || !finding.reached() ? finding.outcome() : "(" + finding.outcome() + ")"
        };
    }

    private static String orEmpty(@Nullable String text) {
        return text == null ? "" : text;
    }

    static String pad(String text, int width, boolean right) {
        String blanks = " ".repeat(Math.max(0, width - text.length()));
        return right ? blanks + text : text + blanks;
    }
}
