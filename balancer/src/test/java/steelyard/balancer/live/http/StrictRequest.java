package steelyard.balancer.live.http;

import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/**
 * A second reading of requests, by RFC 9112 to the letter and with nothing of the balancer in it. What it refuses must
 * never be passed on.
 *
 * @param fields name and value of each line, in order
 */
record StrictRequest(String method, String target, boolean old, List<String[]> fields, String content) {
    /** What the octets came to. */
    enum End {
        /** Nothing is left over. */
        WHOLE,
        /** The last message is not whole. */
        OPEN,
        /** What follows the last message is no request. */
        FAULTY
    }

    /** @param requests those that were whole, in order */
    record Reading(List<StrictRequest> requests, End end) {}

    static Reading read(String octets) {
        List<StrictRequest> requests = new ArrayList<>();
        Cursor at = new Cursor(octets);
        while (true) {
            at.skipEmptyLines();
            if (at.rest().isEmpty()) {
                return new Reading(requests, End.WHOLE);
            }
            if (at.rest().equals("\r")) {
                return new Reading(requests, End.OPEN);
            }
            try {
                requests.add(one(at));
            } catch (Open open) {
                return new Reading(requests, End.OPEN);
            } catch (Faulty faulty) {
                return new Reading(requests, End.FAULTY);
            }
        }
    }

    private static StrictRequest one(Cursor at) throws Open, Faulty {
        String[] line = at.line().split(" ", -1);
        if (line.length != 3 || !token(line[0]) || !visible(line[1]) || !line[2].matches("HTTP/1\\.[0-9]")) {
            throw new Faulty();
        }
        boolean old = line[2].equals("HTTP/1.0");
        List<String[]> fields = fields(at);
        return new StrictRequest(line[0], line[1], old, fields, content(at, fields, old));
    }

    private static List<String[]> fields(Cursor at) throws Open, Faulty {
        List<String[]> fields = new ArrayList<>();
        for (String line = at.line(); !line.isEmpty(); line = at.line()) {
            int colon = line.indexOf(':');
            if (colon < 1 || !token(line.substring(0, colon)) || !value(line)) {
                throw new Faulty();
            }
            fields.add(new String[] {line.substring(0, colon), trim(line.substring(colon + 1))});
        }
        return fields;
    }

    private static String content(Cursor at, List<String[]> fields, boolean old) throws Open, Faulty {
        List<String> lengths = values(fields, "content-length");
        List<String> codings = values(fields, "transfer-encoding");
        if (!codings.isEmpty()) {
            if (old
                    || !lengths.isEmpty()
                    || codings.size() > 1
                    || !codings.get(0).equalsIgnoreCase("chunked")) {
                throw new Faulty();
            }
            return chunks(at);
        }
        if (lengths.isEmpty()) {
            return "";
        }
        if (lengths.size() > 1 || !lengths.get(0).matches("[0-9]{1,9}")) {
            throw new Faulty();
        }
        return at.take(Integer.parseInt(lengths.get(0)));
    }

    private static String chunks(Cursor at) throws Open, Faulty {
        StringBuilder content = new StringBuilder();
        while (true) {
            String line = at.line();
            int digits = 0;
            while (digits < line.length()
                    && Character.digit(line.charAt(digits), 16) >= 0
                    && line.charAt(digits) < 128) {
                digits++;
            }
            if (digits == 0 || digits > 7 || !line.substring(digits).matches("([ \t]*;.*)?")) {
                throw new Faulty();
            }
            int size = Integer.parseInt(line.substring(0, digits), 16);
            if (size == 0) {
                fields(at);
                return content.toString();
            }
            content.append(at.take(size));
            if (!at.take(2).equals("\r\n")) {
                throw new Faulty();
            }
        }
    }

    static List<String> values(List<String[]> fields, String name) {
        List<String> values = new ArrayList<>(2);
        for (String[] field : fields) {
            if (field[0].length() == name.length()
                    && field[0].toLowerCase(Locale.ROOT).equals(name)) {
                values.add(field[1]);
            }
        }
        return values;
    }

    private static boolean token(String text) {
        for (int i = 0; i < text.length(); i++) {
            char c = text.charAt(i);
            if (c <= ' ' || c >= 0x7f || "(),/:;<=>?@[\\]{}\"".indexOf(c) >= 0) {
                return false;
            }
        }
        return !text.isEmpty();
    }

    private static boolean visible(String text) {
        return !text.isEmpty() && text.chars().allMatch(c -> c > ' ' && c < 0x7f);
    }

    private static boolean value(String text) {
        return text.chars().allMatch(c -> c >= ' ' && c != 0x7f || c == '\t');
    }

    private static String trim(String value) {
        int from = 0;
        int to = value.length();
        while (from < to && blank(value.charAt(from))) {
            from++;
        }
        while (to > from && blank(value.charAt(to - 1))) {
            to--;
        }
        return value.substring(from, to);
    }

    private static boolean blank(char c) {
        return c == ' ' || c == '\t';
    }

    /** As octets, for messages. */
    static byte[] octets(String text) {
        return text.getBytes(StandardCharsets.ISO_8859_1);
    }

    private static final class Cursor {
        private final String octets;
        private int at;

        Cursor(String octets) {
            this.octets = octets;
        }

        String rest() {
            return octets.substring(at);
        }

        void skipEmptyLines() {
            while (octets.startsWith("\r\n", at)) {
                at += 2;
            }
        }

        /** The next line; one with a CR or LF of its own is faulty even before it is whole. */
        String line() throws Open, Faulty {
            int end = octets.indexOf('\n', at);
            int carriage = octets.indexOf('\r', at);
            if (carriage >= 0 && carriage + 1 < octets.length() && octets.charAt(carriage + 1) != '\n'
                    || end >= 0 && carriage != end - 1) {
                throw new Faulty();
            }
            if (end < 0) {
                throw new Open();
            }
            String line = octets.substring(at, end - 1);
            at = end + 1;
            return line;
        }

        String take(int count) throws Open {
            if (octets.length() - at < count) {
                throw new Open();
            }
            at += count;
            return octets.substring(at - count, at);
        }
    }

    private static final class Open extends Exception {
        private static final long serialVersionUID = 1L;

        Open() {
            super(null, null, false, false);
        }
    }

    private static final class Faulty extends Exception {
        private static final long serialVersionUID = 1L;

        Faulty() {
            super(null, null, false, false);
        }
    }
}
