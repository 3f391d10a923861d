package steelyard.harness.report;

import java.util.Locale;

/** Numbers as the page writes them. */
final class Figures {
    static final String NONE = "–";

    private Figures() {}

    static String count(double value) {
        return Double.isFinite(value) ? String.format(Locale.ROOT, "%,.0f", value) : NONE;
    }

    /** A share from 0 to 1 as a percentage with one decimal, without the sign. */
    static String percent(double share) {
        return fixed(share * 100, 1);
    }

    static String fixed(double value, int decimals) {
        return Double.isFinite(value) ? String.format(Locale.ROOT, "%,." + decimals + "f", value) : NONE;
    }

    /** Seconds, to 100 ms, without a decimal that is zero, with the unit. */
    static String seconds(double seconds) {
        return plainSeconds(seconds) + " s";
    }

    static String plainSeconds(double seconds) {
        return trimmed(seconds);
    }

    /** One decimal, unless it is zero. */
    static String trimmed(double value) {
        String text = String.format(Locale.ROOT, "%.1f", value);
        return text.endsWith(".0") ? text.substring(0, text.length() - 2) : text;
    }
}
