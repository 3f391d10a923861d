package steelyard.harness.report;

import java.math.BigDecimal;
import java.math.RoundingMode;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/**
 * Where a scale is marked: at multiples of 1, 2 or 5 times a power of ten that span all values. A scale whose values are
 * all above zero and differ by more than {@value #MOST_LINEAR} times is logarithmic.
 *
 * @param from where the scale begins
 * @param to where it ends
 */
record Ticks(double from, double to, boolean log, List<Double> list) {
    private static final int MOST = 6;
    private static final double MOST_LINEAR = 12;

    static Ticks of(double... values) {
        double least = Arrays.stream(values).min().orElse(0);
        double most = Arrays.stream(values).max().orElse(1);
        return least > 0 && most / least > MOST_LINEAR ? log(least, most) : linear(least, most);
    }

    private static Ticks linear(double least, double most) {
        double from = least;
        double to = most;
        if (to - from <= Math.abs(to) * 1e-9) {
            double room = to == 0 ? 1 : Math.abs(to) / 2;
            from -= to == 0 ? 0 : room;
            to += room;
        }
        if (from > 0 && from < (to - from) / 2) {
            from = 0;
        }
        BigDecimal step = step((to - from) / (MOST - 1));
        BigDecimal at =
                BigDecimal.valueOf(from).divide(step, 0, RoundingMode.FLOOR).multiply(step);
        List<Double> ticks = new ArrayList<>(List.of(at.doubleValue()));
        while (at.doubleValue() < to && ticks.size() < 3 * MOST) {
            at = at.add(step);
            ticks.add(at.doubleValue());
        }
        return new Ticks(ticks.get(0), at.doubleValue(), false, List.copyOf(ticks));
    }

    /** All of 1, 2 and 5 times powers of ten from the last below the least to the first above the most. */
    private static Ticks log(double least, double most) {
        List<Double> ticks = new ArrayList<>();
        boolean sparse = most / least > 2_000;
        for (int power = exponent(least) - 1; power <= exponent(most) + 1; power++) {
            for (int times : sparse ? new int[] {1} : new int[] {1, 2, 5}) {
                double value =
                        BigDecimal.valueOf(times).scaleByPowerOfTen(power).doubleValue();
                if (!ticks.isEmpty() && value < least) {
                    ticks.clear();
                }
                ticks.add(value);
                if (value > most) {
                    return new Ticks(ticks.get(0), value, true, List.copyOf(ticks));
                }
            }
        }
        throw new IllegalStateException("no scale from " + least + " to " + most);
    }

    private static int exponent(double value) {
        return (int) StrictMath.floor(StrictMath.log10(value));
    }

    /** The smallest of 1, 2, 5 and 10 times a power of ten that is not smaller. */
    private static BigDecimal step(double atLeast) {
        BigDecimal power = BigDecimal.ONE.scaleByPowerOfTen(exponent(atLeast));
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
        return log ? StrictMath.log(value / from) / StrictMath.log(to / from) : (value - from) / (to - from);
    }
}
