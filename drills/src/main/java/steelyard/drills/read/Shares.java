package steelyard.drills.read;

import java.math.BigDecimal;
import org.jspecify.annotations.Nullable;

/** Shares: percentages in the file, fractions in the model. */
final class Shares {
    static final Quantity<Double> SHARE = Quantity.of("a share", "20%", Shares::fraction)
            .that(s -> s >= 0 && s <= 1, "is out of range", "write a share from 0% to 100%");

    static final Quantity<Double> ABOVE_ZERO =
            SHARE.that(s -> s > 0 && s <= 1, "is out of range", "write a share above 0%, at most 100%");

    private Shares() {}

    private static @Nullable Double fraction(String text) {
        if (!text.endsWith("%")) {
            return null;
        }
        BigDecimal number = Numbers.decimal(text.substring(0, text.length() - 1).strip());
        return number == null ? null : number.movePointLeft(2).doubleValue();
    }
}
