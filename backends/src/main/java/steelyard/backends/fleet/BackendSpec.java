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
 * @param answers folder of mapping files that make its answers, or null for the plain answer of its behaviour
 */
public record BackendSpec(
        String name,
        BehaviourSettings behaviour,
        @Nullable String probePath,
        @Nullable Path answers) {
    public BackendSpec {
        Objects.requireNonNull(name);
        Objects.requireNonNull(behaviour);
        if (probePath != null && !probePath.startsWith("/")) {
            throw new IllegalArgumentException("probe path of " + name + " must start with /, but is " + probePath);
        }
    }
}
