package steelyard.drills.read;

import java.util.Objects;

/**
 * Something wrong with a drill file, or worth knowing about it, and where.
 *
 * @param file the file as the person named it
 * @param line from 1; 0 for the file as a whole
 * @param column from 1, in characters; 0 for the file as a whole
 * @param message what is wrong, one line without a full stop
 * @param remedy what to do about it, one line without a full stop
 */
public record Problem(Severity severity, String file, int line, int column, String message, String remedy) {
    public Problem {
        Objects.requireNonNull(severity);
        Objects.requireNonNull(file);
        message = oneLine(message);
        remedy = oneLine(remedy);
    }

    /** How much it matters. */
    public enum Severity {
        /** The drill cannot be played. */
        PROBLEM,
        /** The drill can be played, but may not say what was meant. */
        NOTICE
    }

    /** One line, as it is shown: {@code file:line:column: message; remedy}; the file alone where that is the place. */
    @Override
    public String toString() {
        String word = severity == Severity.NOTICE ? "notice: " : "";
        String place = line == 0 ? file : file + ":" + line + ":" + column;
        return place + ": " + word + message + "; " + remedy;
    }

    /** Text of the file may be quoted in it, so nothing of it may break the line or act on a terminal. */
    private static String oneLine(String text) {
        StringBuilder line = new StringBuilder(text.length());
        text.codePoints().forEach(c -> line.appendCodePoint(Character.isISOControl(c) ? ' ' : c));
        return line.toString();
    }
}
