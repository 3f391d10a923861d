package steelyard.drills.read;

import java.nio.file.Path;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Forwarded;
import steelyard.drills.model.Front;
import steelyard.drills.model.Wire;

/** Reads how pools speak to both sides; no two fronts of a stage have one port. */
final class FrontReader {
    private static final Quantity<Integer> PORT = Numbers.from(1, 65_535);
    private static final Quantity<Front.Kind> KIND = Words.of("a kind of front", Front.Kind.values());
    private static final Quantity<Forwarded> FORWARDED = Words.of("true, false or hidden", Forwarded.values());
    private static final Quantity<String> VARIABLE = Quantity.of(
                    "the name of an environment variable", "STORE_PASSWORD", text -> text)
            .that(
                    text -> text.matches("[A-Za-z_][A-Za-z0-9_]{0,99}"),
                    "cannot name an environment variable",
                    "use letters, digits and underscores; the password itself does not belong in a drill");

    private final Problems problems;
    private final FileNames files;
    private final Map<Integer, String> ports = new HashMap<>();

    FrontReader(Problems problems, @Nullable Path folder) {
        this.problems = problems;
        this.files = new FileNames(problems, folder);
    }

    Wire read(Fields pool, String poolName) {
        Fields front = pool.map("front", Keys.FRONT);
        return new Wire(
                new Front(port(front, poolName), front.read("kind", KIND, Front.Kind.HTTP), tls(front)),
                pool.read("forwarded", FORWARDED, Forwarded.NOT_ADDED),
                pool.read("backend-tls", Numbers.YES_OR_NO, false));
    }

    private int port(Fields front, String pool) {
        int port = front.read("port", PORT, 0);
        String other = port == 0 ? null : ports.putIfAbsent(port, pool);
        if (other != null) {
            problems.add(
                    front.valuePlace("port"),
                    "port " + port + " is the front of pool '" + other + "' already",
                    "choose another one");
        }
        return port;
    }

    private Front.@Nullable Tls tls(Fields front) {
        if (!front.has("tls")) {
            return null;
        }
        if (front.node("tls") instanceof Node.Scalar) {
            return front.read("tls", Numbers.YES_OR_NO, false) ? Front.Tls.THROW_AWAY : null;
        }
        Fields fields = front.map("tls", Keys.TLS);
        boolean ofFiles = fields.has("certificate") || fields.has("key");
        boolean ofStore = fields.has("store") || fields.has("password-from");
        if (ofFiles == ofStore) {
            if (!fields.odd()) {
                problems.add(
                        front.valuePlace("tls"),
                        ofFiles ? "a certificate comes from files or from a store" : "tls names no certificate",
                        "write certificate and key, or store and password-from, or tls: true for one made at start");
            }
            return Front.Tls.THROW_AWAY;
        }
        return ofFiles ? files(fields) : store(fields);
    }

    private Front.Tls files(Fields fields) {
        for (String key : List.of("certificate", "key")) {
            if (!fields.has(key)) {
                fields.missing(key, "a certificate and its key go together; write " + key + ": " + key + ".pem");
            }
        }
        String certificate = files.read(fields, "certificate");
        String key = files.read(fields, "key");
        return certificate == null || key == null ? Front.Tls.THROW_AWAY : Front.Tls.files(certificate, key);
    }

    private Front.Tls store(Fields fields) {
        for (String key : List.of("store", "password-from")) {
            if (!fields.has(key)) {
                fields.missing(
                        key, "write store: front.p12, password-from: the environment variable that holds its password");
            }
        }
        String store = files.read(fields, "store");
        String variable = fields.read("password-from", VARIABLE);
        return store == null || variable == null ? Front.Tls.THROW_AWAY : Front.Tls.store(store, variable);
    }
}
