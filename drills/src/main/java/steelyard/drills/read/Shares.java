package steelyard.drills.read;

import java.math.BigDecimal;
import org.jspecify.annotations.Nullable;

/** Shares: percentages in the file, fractions in the model. */
final class Shares {
    static final Quantity<Double> SHARE = Quantity.of("a share", "20%", Shares::fraction)
            .that(s -> s >= 0 && s <= 1, "is out of range", "write a share from 0% to 100%");

    static final Quantity<Double> ABOVE_ZERO =
            SHARE.that(s -> s > 0 && s <= 1, "is out of range", "write a share above 0%, at most 100%");

    /** Of what may never be nothing: a thousandth at least. */
    static final Quantity<Double> FLOOR =
            SHARE.that(s -> s >= 0.001 && s <= 1, "is out of range", "write a share from 0.1% to 100%");

    /** Of what must not be the whole. */
    static final Quantity<Double> BELOW_WHOLE =
            SHARE.that(s -> s >= 0 && s < 1, "is out of range", "write a share of at least 0%, below 100%");

    /** A whole or more. */
    static final Quantity<Double> WHOLE_OR_MORE =
            SHARE.that(s -> s >= 1 && s <= 100, "is out of range", "write a share from 100% to 10000%");

    private Shares() {}

    private static @Nullable Double fraction(String text) {
        if (!text.endsWith("%")) {
            return null;
        }
        BigDecimal number = Numbers.decimal(text.substring(0, text.length() - 1).strip());
        return number == null ? null : number.movePointLeft(2).doubleValue();
    }
}
