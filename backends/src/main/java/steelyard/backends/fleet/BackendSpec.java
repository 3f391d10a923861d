package steelyard.backends.fleet;

import java.nio.file.Path;
import java.util.Objects;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.BehaviourSettings;

/**
 * One backend to start. Immutable.
 *
 * @param name for messages
 * @param behaviour how it serves
 * @param probePath the path that is answered as a probe, starting with a slash, or null if it has none
 * @param loadPath the path of its load page, starting with a slash, or null if it has none; only with a behaviour that has
 *     a load page
 * @param answers folder of mapping files that make its answers, or null for the plain answer of its behaviour
 * @param tls whether it serves TLS, with the certificate of {@link Fleet#certificate}
 */
public record BackendSpec(
        String name,
        BehaviourSettings behaviour,
        @Nullable String probePath,
        @Nullable String loadPath,
        @Nullable Path answers,
        boolean tls) {
    public BackendSpec {
        Objects.requireNonNull(name);
        Objects.requireNonNull(behaviour);
        requirePath(name, "probe", probePath);
        requirePath(name, "load", loadPath);
        if (loadPath != null && behaviour.load() == null) {
            throw new IllegalArgumentException("load path of " + name + " needs a behaviour with a load page");
        }
        if (loadPath != null && loadPath.equals(probePath)) {
            throw new IllegalArgumentException("probe path and load path of " + name + " are both " + loadPath);
        }
    }

    /** Without a load page and TLS. */
    public BackendSpec(String name, BehaviourSettings behaviour, @Nullable String probePath, @Nullable Path answers) {
        this(name, behaviour, probePath, null, answers, false);
    }

    private static void requirePath(String name, String what, @Nullable String path) {
        if (path != null && !path.startsWith("/")) {
            throw new IllegalArgumentException(what + " path of " + name + " must start with /, but is " + path);
        }
    }
}
