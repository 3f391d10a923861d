package steelyard.harness.forecast;

import java.util.Arrays;

/** One column over plays: for each slice the median, the 5 % and 95 % quantiles and the mean; NaN where no play has a value. */
final class Band {
    final double[] low;
    final double[] median;
    final double[] high;
    final double[] mean;

    Band(int slices) {
        low = filled(slices);
        median = filled(slices);
        high = filled(slices);
        mean = filled(slices);
    }

    private static double[] filled(int slices) {
        double[] values = new double[slices];
        Arrays.fill(values, Double.NaN);
        return values;
    }

    /** Puts a slice in place from the first {@code size} values, which it puts in another order. */
    void put(int slice, double[] values, int size) {
        if (size == 0) {
            return;
        }
        double sum = 0;
        for (int at = 0; at < size; at++) {
            sum += values[at];
        }
        double[] band = Spread.band(values, size);
        low[slice] = band[0];
        median[slice] = band[1];
        high[slice] = band[2];
        mean[slice] = sum / size;
    }
}
