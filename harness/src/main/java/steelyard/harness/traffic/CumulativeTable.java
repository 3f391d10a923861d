package steelyard.harness.traffic;

/** Picks one of n things by their shares, in O(log n), or O(1) where all shares are equal. Immutable. */
final class CumulativeTable {
    private final double[] upTo;
    private final int size;

    private CumulativeTable(double[] upTo, int size) {
        this.upTo = upTo;
        this.size = size;
    }

    /** Every one of {@code size} things alike. */
    static CumulativeTable even(int size) {
        return new CumulativeTable(new double[0], size);
    }

    /** By weights of 0 or above, at least one of them above 0. */
    static CumulativeTable of(double[] weights) {
        double[] upTo = new double[weights.length];
        double sum = 0;
        for (int i = 0; i < weights.length; i++) {
            sum += weights[i];
            upTo[i] = sum;
        }
        for (int i = 0; i < upTo.length; i++) {
            // Whatever follows the last weight above 0 then stands at exactly 1, which no draw reaches.
            upTo[i] = upTo[i] == sum ? 1 : upTo[i] / sum;
        }
        return new CumulativeTable(upTo, weights.length);
    }

    /** The k-th of {@code size} things, counted from 1, gets the share k^-skew: Zipf's law. */
    static CumulativeTable zipf(int size, double skew) {
        if (skew == 0) {
            return even(size);
        }
        double[] weights = new double[size];
        for (int i = 0; i < size; i++) {
            weights[i] = StrictMath.pow(i + 1.0, -skew);
        }
        return of(weights);
    }

    /** The thing at a point of [0, 1). */
    int at(double unit) {
        return upTo.length == 0 ? Math.min(size - 1, (int) (unit * size)) : search(unit);
    }

    /** The first place whose cumulative share is above the point, so that a share of 0 is never picked. */
    private int search(double unit) {
        int low = 0;
        int high = upTo.length - 1;
        while (low < high) {
            int middle = (low + high) >>> 1;
            if (upTo[middle] > unit) {
                high = middle;
            } else {
                low = middle + 1;
            }
        }
        return low;
    }
}
