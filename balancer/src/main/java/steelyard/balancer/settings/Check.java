package steelyard.balancer.settings;

import java.util.Locale;

/** Checks of the records of this package. */
final class Check {
    private Check() {}

    static void that(boolean holds, String message, Object... values) {
        if (!holds) {
            throw new IllegalArgumentException(String.format(Locale.ROOT, message, values));
        }
    }
}
