package steelyard.drills.read;

import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Traffic;

/** Reads one kind of request of a mix. */
final class RequestReader {
    private static final List<String> METHODS = List.of("get", "head", "post", "put", "delete", "patch", "options");
    private static final int MOST_VALUE = 4_096;
    private static final Quantity<String> VALUE = Quantity.of("the value of a header", "berth-{client}", text -> text)
            .that(RequestReader::fitsHead, "cannot stand in a head", "use printable ASCII, 4096 characters at most");

    /** Fields of one hop, and those that say how long a message is: the generator writes them itself. */
    private static final List<String> OWN = List.of(
            "host",
            "connection",
            "content-length",
            "transfer-encoding",
            "upgrade",
            "te",
            "trailer",
            "keep-alive",
            "proxy-connection",
            "expect");

    private final Problems problems;

    RequestReader(Problems problems) {
        this.problems = problems;
    }

    Traffic.Request read(Fields fields, double share) {
        List<String> methods = fields.given().stream().filter(METHODS::contains).toList();
        String method = methods.isEmpty() ? "get" : methods.get(0);
        if (methods.size() != 1 && !fields.odd()) {
            problems.add(
                    fields.place(),
                    methods.isEmpty() ? "a request needs a method and a path" : "a request has one method",
                    "write one, such as get: /sailings/today");
        }
        String path = fields.read(method, Paths.PATH, "/");
        Paths.checkStandIns(path, fields.valuePlace(method), problems);
        String upgrade = upgrade(fields, method);
        return new Traffic.Request(
                method.toUpperCase(Locale.ROOT),
                path,
                share,
                fields.read("body", Sizes.SIZE, 0),
                new HashSet<>(fields.values("good", Numbers.STATUS)),
                headers(fields),
                upgrade,
                open(fields, upgrade));
    }

    private @Nullable String upgrade(Fields fields, String method) {
        if (!fields.has("upgrade")) {
            return null;
        }
        String protocol = fields.read("upgrade", Names.TOKEN);
        boolean get = method.equals("get");
        if (!get) {
            problems.add(fields.keyPlace("upgrade"), "an upgrade is asked for with get", "write get and its path");
        }
        refuse(fields, "body", "a request for an upgrade has no body");
        refuse(fields, "good", "a request for an upgrade is good with 101, and with nothing else");
        return get ? protocol : null;
    }

    private void refuse(Fields fields, String key, String why) {
        if (fields.has(key)) {
            problems.add(fields.keyPlace(key), why, "leave " + key + " out");
        }
    }

    private long open(Fields fields, @Nullable String upgrade) {
        if (fields.has("open") && !fields.has("upgrade")) {
            problems.add(
                    fields.keyPlace("open"),
                    "only the tunnel of an upgrade stays open",
                    "write upgrade: websocket, or leave open out");
        }
        long open = fields.read("open", Durations.POSITIVE, Traffic.Request.USUAL_OPEN_NANOS);
        return upgrade == null ? 0 : open;
    }

    private Map<String, String> headers(Fields fields) {
        Node node = fields.node("headers");
        if (node == null) {
            return Map.of();
        }
        if (!(node instanceof Node.Entries map)) {
            problems.add(
                    node.place(), "'headers' is " + node.noun() + ", not a map", "write headers: {x-berth: north}");
            return Map.of();
        }
        Map<String, String> headers = new LinkedHashMap<>();
        for (Node.Entry entry : map.list()) {
            String name = entry.key().toLowerCase(Locale.ROOT);
            String value = VALUE.read(entry.value(), entry.key(), problems);
            if (!Names.isToken(entry.key())) {
                problems.add(
                        entry.place(),
                        Quantity.quoted(entry.key()) + " cannot name a header",
                        "use letters, digits and dashes, 60 at most");
            } else if (OWN.contains(name)) {
                problems.add(entry.place(), "the generator writes '" + entry.key() + "' itself", "leave it out");
            } else if (headers.keySet().stream().anyMatch(there -> there.equalsIgnoreCase(name))) {
                problems.add(entry.place(), "header '" + entry.key() + "' is there twice", "keep one");
            } else if (value != null) {
                Paths.checkStandIns(value, entry.value().place(), problems);
                headers.put(entry.key(), value);
            }
        }
        return headers;
    }

    private static boolean fitsHead(String value) {
        return !value.isEmpty() && value.length() <= MOST_VALUE && value.chars().allMatch(c -> c >= ' ' && c < 0x7f);
    }
}
