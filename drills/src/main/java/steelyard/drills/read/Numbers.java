package steelyard.drills.read;

import java.math.BigDecimal;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Plain numbers. */
final class Numbers {
    /** A number with or without a fraction. */
    static final Quantity<Double> NUMBER = Quantity.of("a number", "1.5", Numbers::number);

    static final Quantity<Double> NOT_NEGATIVE =
            NUMBER.that(n -> n >= 0, "is negative", "write a number of at least 0");

    private static final Quantity<Integer> WHOLE = Quantity.of("a whole number", "3", Numbers::whole);

    static final Quantity<Boolean> YES_OR_NO =
            new Quantity<>("true or false", "true", List.of(), List.of("true", "false"), Numbers::truth, null);

    static final Quantity<Integer> STATUS = Quantity.of("an HTTP status", "503", Numbers::whole)
            .that(n -> n >= 200 && n <= 599, "is no final HTTP status", "write a number from 200 to 599");

    private Numbers() {}

    static Quantity<Integer> from(int least, int most) {
        String remedy = "write a whole number from " + least + " to " + most;
        return WHOLE.that(n -> n >= least && n <= most, "is out of range", remedy);
    }

    /** Whether a text is a number without anything else. */
    static boolean isNumber(String text) {
        return decimal(text) != null;
    }

    /**
     * Digits with at most one point and perhaps a sign, or null. No exponent and at most 18 digits: what is longer is
     * a slip, and cannot overflow what is made of it.
     */
    static @Nullable BigDecimal decimal(String text) {
        int start = text.startsWith("-") || text.startsWith("+") ? 1 : 0;
        int digits = 0;
        int points = 0;
        for (int i = start; i < text.length(); i++) {
            char c = text.charAt(i);
            if (c == '.') {
                points++;
            } else if (c >= '0' && c <= '9') {
                digits++;
            } else {
                return null;
            }
        }
        boolean number = digits > 0 && digits <= 18 && points <= 1 && !text.endsWith(".");
        return number ? new BigDecimal(text) : null;
    }

    private static @Nullable Double number(String text) {
        BigDecimal value = decimal(text);
        return value == null ? null : value.doubleValue();
    }

    /** What is beyond an int becomes the least or the greatest one, so that a message can say the range. */
    private static @Nullable Integer whole(String text) {
        boolean signed = text.startsWith("-") || text.startsWith("+");
        String digits = signed ? text.substring(1) : text;
        if (digits.isEmpty() || digits.chars().anyMatch(c -> c < '0' || c > '9')) {
            return null;
        }
        BigDecimal value = decimal(digits);
        int size = value == null ? Integer.MAX_VALUE : (int) Math.min(Integer.MAX_VALUE, value.longValue());
        return text.startsWith("-") ? -size : size;
    }

    private static @Nullable Boolean truth(String text) {
        return text.equals("true") ? Boolean.TRUE : text.equals("false") ? Boolean.FALSE : null;
    }
}
