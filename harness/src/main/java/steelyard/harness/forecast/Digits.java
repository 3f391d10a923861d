package steelyard.harness.forecast;

import com.fasterxml.jackson.databind.node.ObjectNode;
import java.math.BigDecimal;
import java.math.MathContext;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Measure.Unit;

/** Values as the files of a forecast hold them: twelve significant digits, by the same arithmetic on every JVM. */
final class Digits {
    private static final MathContext TWELVE = new MathContext(12);
    private static final int NANO_PLACES = 9;

    private Digits() {}

    /** Durations in seconds, everything else as it is; null for NaN. */
    static @Nullable BigDecimal of(Unit unit, double value) {
        if (Double.isNaN(value)) {
            return null;
        }
        BigDecimal exact = new BigDecimal(value);
        BigDecimal shown = (unit == Unit.DURATION ? exact.movePointLeft(NANO_PLACES) : exact).round(TWELVE);
        return shown.signum() == 0 ? BigDecimal.ZERO : whole(shown.stripTrailingZeros());
    }

    private static BigDecimal whole(BigDecimal value) {
        return value.scale() < 0 ? value.setScale(0) : value;
    }

    static void put(ObjectNode node, String key, Unit unit, double value) {
        node.put(key, of(unit, value));
    }
}
