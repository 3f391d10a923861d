package steelyard.harness.report;

import java.math.BigDecimal;
import java.math.RoundingMode;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/**
 * Where a scale is marked: at multiples of 1, 2 or 5 times a power of ten that span all values.
 *
 * @param from first mark
 * @param to last mark, above the first
 */
record Ticks(double from, double to, List<Double> list) {
    private static final int MOST = 6;

    static Ticks of(double... values) {
        double least = Arrays.stream(values).min().orElse(0);
        double most = Arrays.stream(values).max().orElse(1);
        if (most - least <= Math.abs(most) * 1e-9) {
            double room = most == 0 ? 1 : Math.abs(most) / 2;
            least -= most == 0 ? 0 : room;
            most += room;
        }
        if (least > 0 && least < (most - least) / 2) {
            least = 0;
        }
        BigDecimal step = step((most - least) / (MOST - 1));
        BigDecimal first =
                BigDecimal.valueOf(least).divide(step, 0, RoundingMode.FLOOR).multiply(step);
        List<Double> ticks = new ArrayList<>();
        BigDecimal at = first;
        ticks.add(at.doubleValue());
        while (at.doubleValue() < most && ticks.size() < 3 * MOST) {
            at = at.add(step);
            ticks.add(at.doubleValue());
        }
        return new Ticks(first.doubleValue(), at.doubleValue(), List.copyOf(ticks));
    }

    /** The smallest of 1, 2 and 5 times a power of ten that is not smaller. */
    private static BigDecimal step(double atLeast) {
        BigDecimal power = BigDecimal.ONE.scaleByPowerOfTen((int) StrictMath.floor(StrictMath.log10(atLeast)));
        for (int times : new int[] {1, 2, 5}) {
            BigDecimal step = power.multiply(BigDecimal.valueOf(times));
            if (step.doubleValue() >= atLeast) {
                return step;
            }
        }
        return power.multiply(BigDecimal.TEN);
    }

    /** Where a value lies on the scale, from 0 to 1. */
    double part(double value) {
        return (value - from) / (to - from);
    }
}
