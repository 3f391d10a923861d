package steelyard.harness.report;

import java.util.List;
import java.util.regex.Pattern;

/** Builds tables and keeps text from being read as markup. */
final class Html {
    private static final Pattern OPTION = Pattern.compile("(?<!\\S)--[a-z-]+");

    private final StringBuilder out = new StringBuilder();

    /** Text made safe between tags and inside quoted attributes. */
    static String text(String raw) {
        return raw.replace("&", "&amp;")
                .replace("<", "&lt;")
                .replace(">", "&gt;")
                .replace("\"", "&quot;")
                .replace("'", "&#39;");
    }

    /** The same of sentences, in which no line breaks behind the hyphens of an option such as {@code --vary}. */
    static String prose(String raw) {
        return OPTION.matcher(text(raw)).replaceAll("<span class=\"whole\">$0</span>");
    }

    /** Adds markup as it is. */
    Html raw(String markup) {
        out.append(markup);
        return this;
    }

    Html table(String css, String caption, List<Column> columns) {
        out.append("<div class=\"wide\" tabindex=\"0\" role=\"region\" aria-label=\"")
                .append(text(caption))
                .append("\"><table class=\"")
                .append(css)
                .append("\"><caption>")
                .append(text(caption))
                .append("</caption><thead><tr>");
        for (Column column : columns) {
            out.append("<th scope=\"col\"").append(column.css()).append('>').append(column.head());
            if (!column.unit().isEmpty()) {
                out.append(" <small>").append(column.unit()).append("</small>");
            }
            out.append("</th>");
        }
        out.append("</tr></thead><tbody>\n");
        return this;
    }

    Html row(List<Column> columns, List<String> cells) {
        out.append("<tr>");
        for (int at = 0; at < cells.size(); at++) {
            Column column = columns.get(at);
            String tag = column.heads() ? "th scope=\"row\"" : "td";
            out.append('<').append(tag).append(column.css(cells.get(at)));
            out.append(" data-head=\"").append(column.label()).append("\">");
            out.append(text(cells.get(at)));
            out.append(column.heads() ? "</th>" : "</td>");
        }
        out.append("</tr>\n");
        return this;
    }

    Html endTable() {
        out.append("</tbody></table></div>\n");
        return this;
    }

    @Override
    public String toString() {
        return out.toString();
    }

    /**
     * A column of a table.
     *
     * @param unit shown small after the head, or empty
     * @param heads whether its cells are the heads of their rows
     */
    record Column(String head, String unit, String kind, boolean heads) {
        static Column words(String head) {
            return new Column(text(head), "", "", false);
        }

        static Column rowHead(String head) {
            return new Column(text(head), "", "", true);
        }

        static Column number(String head, String unit) {
            return new Column(text(head), text(unit), "n", false);
        }

        static Column outcome(String head) {
            return new Column(text(head), "", "outcome", false);
        }

        static Column failure(String head) {
            return new Column(text(head), "", "n failure", false);
        }

        String css() {
            return kind.isEmpty() ? "" : " class=\"" + kind + "\"";
        }

        /** Failures that did not happen are not shown as failures; a plain outcome finds room beside its measure. */
        String css(String cell) {
            if (kind.equals("outcome")) {
                return cell.equals("met") ? " class=\"outcome short\"" : " class=\"outcome\"";
            }
            return cell.equals("0") && kind.contains("failure") ? " class=\"n\"" : css();
        }

        /** The head as it stands before a cell where a narrow page breaks a row up. */
        String label() {
            return unit.isEmpty() ? head : head + ", " + unit;
        }
    }
}
