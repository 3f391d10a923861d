package steelyard.drills.model;

import java.util.Locale;
import org.jspecify.annotations.Nullable;

/** Checks of the records of this package. */
final class Check {
    private Check() {}

    static void that(boolean holds, String message, @Nullable Object... values) {
        if (!holds) {
            throw new IllegalArgumentException(String.format(Locale.ROOT, message, values));
        }
    }

    static void share(double share, String what) {
        that(share >= 0 && share <= 1, "%s is a share from 0 to 1, not %s", what, share);
    }

    static void notNegative(long value, String what) {
        that(value >= 0, "%s cannot be negative: %d", what, value);
    }

    static void positive(long value, String what) {
        that(value > 0, "%s must be above zero: %d", what, value);
    }
}
