package steelyard.drills.read;

import java.math.BigDecimal;
import java.math.RoundingMode;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Durations, in nanoseconds: numbers with a unit, perhaps several of falling unit ({@code 1m30s}). */
final class Durations {
    static final long SECOND = 1_000_000_000L;
    static final long MILLISECOND = 1_000_000L;
    static final long DAY = 24 * 3600 * SECOND;

    private static final List<String> UNITS = List.of("h", "m", "s", "ms", "us");
    private static final long[] NANOS = {3600 * SECOND, 60 * SECOND, SECOND, 1_000_000, 1_000};

    /** From zero to a day. */
    static final Quantity<Long> DURATION = Quantity.of("a duration", "15s, 250ms, 1.5s or 1m30s", Durations::nanos)
            .withUnits(List.of("ms", "s", "m"))
            .that(n -> n <= DAY, "is longer than a day", "write at most 24h");

    /** Above zero, to a day. */
    static final Quantity<Long> POSITIVE = DURATION.that(
            n -> n > 0 && n <= DAY, "is not above zero, up to a day", "write a duration above zero, at most 24h");

    /** Of what comes again and again: a millisecond or more, to a day. */
    static final Quantity<Long> PERIOD = DURATION.that(
            n -> n >= 1_000_000 && n <= DAY, "is not between 1ms and a day", "write at least 1ms, at most 24h");

    private Durations() {}

    /** Nanoseconds, or null for a text that is no duration; a negative one is none. */
    static @Nullable Long nanos(String text) {
        long sum = 0;
        int lastUnit = -1;
        int at = 0;
        while (at < text.length()) {
            int unitAt = skip(text, at, true);
            int end = skip(text, unitAt, false);
            BigDecimal number = Numbers.decimal(text.substring(at, unitAt));
            int unit = UNITS.indexOf(text.substring(unitAt, end));
            if (number == null || unit <= lastUnit || number.precision() > 15) {
                return null;
            }
            BigDecimal nanos = number.multiply(BigDecimal.valueOf(NANOS[unit])).setScale(0, RoundingMode.HALF_UP);
            sum += Math.min(nanos.min(BigDecimal.valueOf(Long.MAX_VALUE / 16)).longValue(), Long.MAX_VALUE / 16);
            lastUnit = unit;
            at = end;
        }
        return lastUnit < 0 ? null : Long.valueOf(sum);
    }

    private static int skip(String text, int from, boolean digits) {
        int at = from;
        while (at < text.length() && digits == isDigit(text.charAt(at))) {
            at++;
        }
        return at;
    }

    private static boolean isDigit(char c) {
        return (c >= '0' && c <= '9') || c == '.';
    }

    /** In the largest unit that holds it in whole numbers, up to seconds: {@code 5500ms}; for messages. */
    static String exact(long nanos) {
        if (nanos % SECOND == 0) {
            return nanos / SECOND + "s";
        }
        return nanos % MILLISECOND == 0 ? nanos / MILLISECOND + "ms" : nanos / 1_000 + "us";
    }

    /** As a drill would write it: {@code 1.5s}, {@code 250ms}; for messages. */
    static String text(long nanos) {
        long size = Math.abs(nanos);
        int unit = size >= SECOND || size == 0 ? 2 : size >= 1_000_000 ? 3 : 4;
        BigDecimal number = BigDecimal.valueOf(nanos)
                .divide(BigDecimal.valueOf(NANOS[unit]), 3, RoundingMode.HALF_UP)
                .stripTrailingZeros();
        return number.toPlainString() + UNITS.get(unit);
    }
}
