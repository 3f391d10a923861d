package steelyard.balancer.live;

import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import org.jspecify.annotations.Nullable;

/**
 * One message as it was on the wire, read to the letter of RFC 9112: whatever is not framed without doubt is an error.
 *
 * @param start its first line
 * @param fields name and value of each line in order, names as they came
 * @param whole whether the end of the content was shown by more than the end of the connection
 */
record Message(String start, List<String[]> fields, String content, List<String[]> trailers, boolean whole) {
    /** A request, or null at the end of the connection. */
    static @Nullable Message request(Wire wire) throws IOException {
        String start = wire.readLine();
        if (start == null) {
            return null;
        }
        if (!start.matches("[!-~]+ [!-~]+ HTTP/1\\.1")) {
            throw new IOException("no request line: " + start);
        }
        return rest(wire, start, false, false);
    }

    /**
     * An answer, or null at the end of the connection.
     *
     * @param toHead whether it is to HEAD
     */
    static @Nullable Message answer(Wire wire, boolean toHead) throws IOException {
        String start = wire.readLine();
        if (start == null) {
            return null;
        }
        if (!start.matches("HTTP/1\\.1 [1-5][0-9][0-9] [\\t -~]*")) {
            throw new IOException("no status line: " + start);
        }
        int status = Integer.parseInt(start.substring(9, 12));
        return rest(wire, start, toHead || status < 200 || status == 204 || status == 304, true);
    }

    private static Message rest(Wire wire, String start, boolean empty, boolean answer) throws IOException {
        List<String[]> fields = fields(wire);
        List<String> lengths = values(fields, "content-length");
        List<String> codings = values(fields, "transfer-encoding");
        if (lengths.size() + codings.size() > 1) {
            throw new IOException("framed twice: " + lengths + codings);
        }
        if (empty) {
            return new Message(start, fields, "", List.of(), true);
        }
        if (!codings.isEmpty()) {
            return chunked(wire, start, fields, codings.get(0));
        }
        if (!lengths.isEmpty()) {
            return new Message(start, fields, wire.read(Integer.parseInt(lengths.get(0))), List.of(), true);
        }
        return new Message(start, fields, answer ? wire.readToEnd() : "", List.of(), !answer);
    }

    private static Message chunked(Wire wire, String start, List<String[]> fields, String coding) throws IOException {
        if (!coding.equalsIgnoreCase("chunked")) {
            throw new IOException("coded as " + coding);
        }
        StringBuilder content = new StringBuilder();
        for (int size = size(wire); size > 0; size = size(wire)) {
            content.append(wire.read(size));
            if (!"".equals(wire.readLine())) {
                throw new IOException("no line end behind a chunk");
            }
        }
        return new Message(start, fields, content.toString(), fields(wire), true);
    }

    private static int size(Wire wire) throws IOException {
        String line = wire.readLine();
        if (line == null || !line.matches("[0-9a-fA-F]{1,7}")) {
            throw new IOException("no chunk size: " + line);
        }
        return Integer.parseInt(line, 16);
    }

    private static List<String[]> fields(Wire wire) throws IOException {
        List<String[]> fields = new ArrayList<>();
        for (String line = wire.readLine(); !"".equals(line); line = wire.readLine()) {
            if (line == null || !line.matches("[!#$%&'*+.^_`|~0-9A-Za-z-]+:[\\t -~\\x80-\\xff]*")) {
                throw new IOException("no field line: " + line);
            }
            int colon = line.indexOf(':');
            fields.add(new String[] {
                line.substring(0, colon), line.substring(colon + 1).strip()
            });
        }
        return fields;
    }

    int status() {
        return Integer.parseInt(start.substring(9, 12));
    }

    String target() {
        return start.split(" ")[1];
    }

    String method() {
        return start.split(" ")[0];
    }

    boolean has(String name) {
        return !values(name).isEmpty();
    }

    /** The values of all lines of a name, in order. */
    List<String> values(String name) {
        return values(fields, name);
    }

    /** The one value of a name; an error where there is not exactly one. */
    String value(String name) {
        List<String> values = values(name);
        if (values.size() != 1) {
            throw new AssertionError(name + ": " + values);
        }
        return values.get(0);
    }

    private static List<String> values(List<String[]> fields, String name) {
        return fields.stream()
                .filter(field -> field[0].toLowerCase(Locale.ROOT).equals(name.toLowerCase(Locale.ROOT)))
                .map(field -> field[1])
                .toList();
    }

    @Override
    public String toString() {
        StringBuilder text = new StringBuilder(start);
        fields.forEach(field -> text.append(" | ").append(field[0]).append(": ").append(field[1]));
        return text.append(" || ").append(content).toString();
    }
}
