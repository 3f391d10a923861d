package steelyard.harness.record;

import java.util.Locale;

/** The spelling of constants that have no word of their own: in small letters, with hyphens. */
public final class Words {
    private Words() {}

    /** The word of a constant: {@code up}, {@code warmed}, {@code drill}. */
    public static String of(Enum<?> constant) {
        return constant.name().toLowerCase(Locale.ROOT).replace('_', '-');
    }
}
