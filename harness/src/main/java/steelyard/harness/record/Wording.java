package steelyard.harness.record;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Measure.Unit;

/** Values as a person reads them, the same everywhere: {@code 250 ms}, {@code 2.63 s}, {@code 0.3 %}. */
public final class Wording {
    private static final MathContext THREE = new MathContext(3, RoundingMode.HALF_UP);

    private Wording() {}

    /**
     * A measured value, to three significant digits; counts in full, what lies between two counts to two decimals, plain
     * numbers to four.
     */
    public static String value(Unit unit, double value) {
        return switch (unit) {
            case SHARE -> plain(rounded(BigDecimal.valueOf(value).movePointRight(2))) + " %";
            case DURATION -> duration(value, true);
            case COUNT -> plain(BigDecimal.valueOf(value).setScale(2, RoundingMode.HALF_UP));
            case NUMBER -> plain(BigDecimal.valueOf(value).setScale(4, RoundingMode.HALF_UP));
        };
    }

    /** A value in full, as a bound says it. */
    public static String exact(Unit unit, double value) {
        return switch (unit) {
            case SHARE -> plain(BigDecimal.valueOf(value).movePointRight(2)) + " %";
            case DURATION -> duration(value, false);
            case COUNT, NUMBER -> plain(BigDecimal.valueOf(value));
        };
    }

    /** A bound: {@code at most 0.3 %}, {@code at least 3}, {@code from 1.9 s to 3.2 s}. */
    public static String bound(Unit unit, Bound bound) {
        boolean below = Double.isInfinite(bound.least());
        boolean above = Double.isInfinite(bound.most());
        if (below && above) {
            return "anything";
        }
        if (below) {
            return "at most " + exact(unit, bound.most());
        }
        if (above) {
            return "at least " + exact(unit, bound.least());
        }
        return bound.least() == bound.most()
                ? "exactly " + exact(unit, bound.least())
                : "from " + exact(unit, bound.least()) + " to " + exact(unit, bound.most());
    }

    /** An instant or a duration of a drill in full: {@code 14.9 s}, {@code 250 ms}. */
    public static String duration(long nanos) {
        return duration(nanos, false);
    }

    /** A count with its noun: {@code 1 worker}, {@code 8 workers}. */
    public static String count(long number, String one, String many) {
        return number + " " + (number == 1 ? one : many);
    }

    private static String duration(double nanos, boolean round) {
        if (nanos == 0) {
            return "0 s";
        }
        boolean seconds = Math.abs(nanos) >= 1e9;
        BigDecimal value = BigDecimal.valueOf(nanos).movePointLeft(seconds ? 9 : 6);
        return plain(round ? rounded(value) : value) + (seconds ? " s" : " ms");
    }

    /** Three significant digits, but never fewer than stand before the point. */
    private static BigDecimal rounded(BigDecimal value) {
        int whole = value.precision() - value.scale();
        return whole > 3 ? value.setScale(0, RoundingMode.HALF_UP) : value.round(THREE);
    }

    private static String plain(BigDecimal value) {
        return value.signum() == 0 ? "0" : value.stripTrailingZeros().toPlainString();
    }
}
