package steelyard.drills.read;

import java.math.BigDecimal;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Rates, in requests a second. */
final class Rates {
    private static final double MOST = 10_000_000;

    /** From zero, for a step of silence. */
    static final Quantity<Double> RATE = Quantity.of("a rate", "300/s", Rates::perSecond)
            .withUnits(List.of("/s", "/m"))
            .that(r -> r >= 0 && r <= MOST, "is out of range", "write a rate from 0/s to 10000000/s");

    static final Quantity<Double> POSITIVE =
            RATE.that(r -> r > 0 && r <= MOST, "is out of range", "write a rate above 0/s, at most 10000000/s");

    private Rates() {}

    private static @Nullable Double perSecond(String text) {
        int slash = text.indexOf('/');
        if (slash < 0) {
            return null;
        }
        BigDecimal number = Numbers.decimal(text.substring(0, slash).strip());
        String unit = text.substring(slash + 1).strip();
        if (number == null || !(unit.equals("s") || unit.equals("m"))) {
            return null;
        }
        return unit.equals("s") ? number.doubleValue() : number.doubleValue() / 60;
    }
}
