package steelyard.backends.behave;

import java.util.Objects;

/**
 * A utilisation that a backend shows on its load page, other than the busy share of its workers. Immutable, any thread.
 *
 * @param name starts with a letter, then letters, digits and any of - _ . ; not {@link #CPU}
 * @param base what it reads when nothing is held, 0..1
 * @param each what each request in service or waiting adds, 0..1; the sum is cut at 1
 */
public record Gauge(String name, double base, double each) {

    /** The busy share of the workers over the last second, which every load page shows first. */
    public static final String CPU = "cpu";

    /** What {@link Change.Fill} sets. */
    public static final String DISK = "disk";

    public Gauge {
        requireName(name);
        if (name.equals(CPU)) {
            throw new IllegalArgumentException("gauge cpu is the busy share of the workers and cannot be set");
        }
        requireShare("gauge " + name, base);
        requireShare("gauge " + name + " for each request", each);
    }

    /** Reads the same whatever is held. */
    public static Gauge constant(String name, double base) {
        return new Gauge(name, base, 0);
    }

    /** The value while so many requests are in service or waiting. */
    double value(int held) {
        return Math.min(1, base + each * held);
    }

    static void requireShare(String what, double share) {
        if (!(share >= 0 && share <= 1)) {
            throw new IllegalArgumentException(what + " must be 0 to 1, but is " + share);
        }
    }

    static void requireName(String name) {
        Objects.requireNonNull(name);
        boolean fits = !name.isEmpty() && isLetter(name.charAt(0));
        for (int i = 0; i < name.length(); i++) {
            char c = name.charAt(i);
            fits &= isLetter(c) || c >= '0' && c <= '9' || c == '-' || c == '_' || c == '.';
        }
        if (!fits) {
            throw new IllegalArgumentException(
                    "a gauge needs a name of letters, digits and - _ . that starts with a letter, but got '" + name
                            + "'");
        }
    }

    private static boolean isLetter(char c) {
        return c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z';
    }
}
