package steelyard.harness.compare;

import steelyard.drills.model.Measure;

/**
 * Which side of a measure is the better one.
 *
 * <p>A bound decides where there is one: with {@code at-most} less is better, with {@code at-least} more is, and with
 * {@code between} it is nearer to the middle. Without a bound:
 *
 * <table>
 * <caption>The better side of measures without a bound</caption>
 * <tr><td>less</td><td>failed, longest-outage, latency, detected-in, shifted-in, settled-in, drained-in, cut,
 * standing-changes, retry-load, peak-in-flight, peak-utilisation,
 * weight-lag, swing</td></tr>
 * <tr><td>more</td><td>fairness</td></tr>
 * <tr><td>none</td><td>share</td></tr>
 * </table>
 *
 * @param side which it is
 * @param middle what to be near to under {@link Side#MIDDLE}, in the unit of the measure; 0 otherwise
 */
public record Direction(Side side, double middle) {
    private static final Direction LESS = new Direction(Side.LESS, 0);
    private static final Direction MORE = new Direction(Side.MORE, 0);
    static final Direction NONE = new Direction(Side.NONE, 0);

    /** The sides that can be better. */
    public enum Side {
        LESS("less"),
        MORE("more"),
        MIDDLE("the middle"),
        /** No side of the measure is better by itself. */
        NONE("none");

        private final String word;

        Side(String word) {
            this.word = word;
        }

        /** As files say it. */
        public String word() {
            return word;
        }
    }

    /**
     * The better side of a measure.
     *
     * @param least of its bound; not finite for none
     * @param most of its bound; not finite for none
     */
    public static Direction of(Measure measure, double least, double most) {
        if (Double.isFinite(least) && Double.isFinite(most)) {
            return new Direction(Side.MIDDLE, (least + most) / 2);
        }
        if (Double.isFinite(most)) {
            return LESS;
        }
        return Double.isFinite(least) ? MORE : unbound(measure);
    }

    private static Direction unbound(Measure measure) {
        return switch (measure) {
            case FAILED,
                    LONGEST_OUTAGE,
                    LATENCY,
                    DETECTED_IN,
                    SHIFTED_IN,
                    SETTLED_IN,
                    DRAINED_IN,
                    CUT,
                    STANDING_CHANGES,
                    RETRY_LOAD,
                    PEAK_IN_FLIGHT,
                    PEAK_UTILISATION,
                    WEIGHT_LAG,
                    SWING -> LESS;
            case FAIRNESS -> MORE;
            case SHARE -> NONE;
        };
    }

    /** What a value costs: the smaller the better, whatever the side. NaN stays NaN; without a side, the value. */
    public double cost(double value) {
        return switch (side) {
            case LESS, NONE -> value;
            case MORE -> -value;
            case MIDDLE -> Math.abs(value - middle);
        };
    }
}
