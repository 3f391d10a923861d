package steelyard.harness.judge;

/** Jain's fairness index: (sum of x)^2 / (n * sum of x^2). Jain, Chiu, Hawe, DEC TR-301, 1984. */
public final class Jain {
    private Jain() {}

    /** From 1/n (one has all) to 1 (all have the same); NaN where all are zero or there are none. */
    public static double index(double[] values) {
        double sum = 0;
        double squares = 0;
        for (double each : values) {
            sum += each;
            squares += each * each;
        }
        return squares == 0 ? Double.NaN : sum * sum / (values.length * squares);
    }
}
