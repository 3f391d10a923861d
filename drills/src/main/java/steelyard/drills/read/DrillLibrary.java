package steelyard.drills.read;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.Optional;

/** The bundled drills. Stateless; any thread may call. */
public final class DrillLibrary {
    private static final List<String> NAMES = List.of(
            "cold-return",
            "drain-for-patching",
            "flapping-probe",
            "long-connections",
            "lose-a-zone",
            "lose-one-of-three",
            "many-quays",
            "retry-storm",
            "reweigh-live",
            "silent-berth",
            "slow-one",
            "stale-load",
            "sticky-drain",
            "uneven-hosts",
            "which-probe");

    private DrillLibrary() {}

    /** Every name, in the order of the alphabet; the file of each is its name with {@code .yaml}. */
    public static List<String> names() {
        return NAMES;
    }

    /** The text of a bundled drill, empty for a name that is none. */
    public static Optional<String> text(String name) {
        return NAMES.contains(name) ? Optional.of(resource("library/" + name + ".yaml")) : Optional.empty();
    }

    /** The bundled name that was probably meant, if one is close. */
    public static Optional<String> nearest(String name) {
        return Optional.ofNullable(NearWord.nearest(name, NAMES));
    }

    /** The text of a resource of this module, which is there or the module was packed wrongly. */
    static String resource(String name) {
        try (InputStream in = DrillLibrary.class.getResourceAsStream("/steelyard/drills/" + name)) {
            if (in == null) {
                throw new IllegalStateException("the drills module lacks " + name);
            }
            return new String(in.readAllBytes(), StandardCharsets.UTF_8);
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }
}
