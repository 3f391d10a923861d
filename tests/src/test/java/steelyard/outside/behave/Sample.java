package steelyard.outside.behave;

import static org.assertj.core.api.Assertions.assertThat;

/**
 * Values of one figure from independent replications, and the recipe by which they are held against an expected value:
 * the mean is within 4 standard errors, and the standard error is small enough for that to say something. With 20
 * replications the first half has a false alarm chance of about 8e-4 (t distribution, 19 degrees of freedom); seeds are
 * fixed, so it either always passes or never.
 */
public final class Sample {

    private final double[] values;
    private int size;

    public Sample(int replications) {
        values = new double[replications];
    }

    public void add(double value) {
        values[size++] = value;
    }

    public void mustAgreeWith(String what, double expected, double widestRelativeError) {
        mustAgreeWith(what, expected, 0, widestRelativeError);
    }

    /** As above, where what is expected has a standard error of its own. */
    public void mustAgreeWith(String what, double expected, double errorOfExpected, double widestRelativeError) {
        assertThat(size).isEqualTo(values.length).isGreaterThanOrEqualTo(20);
        double error = standardError();
        assertThat(error).as("standard error of " + what).isLessThanOrEqualTo(widestRelativeError * expected);
        assertThat(Math.abs(mean() - expected))
                .as(what + ": mean " + mean() + ", expected " + expected + ", standard error " + error)
                .isLessThanOrEqualTo(4 * Math.hypot(error, errorOfExpected));
    }

    public double mean() {
        double sum = 0;
        for (double value : values) {
            sum += value;
        }
        return sum / size;
    }

    private double standardError() {
        double mean = mean();
        double squares = 0;
        for (double value : values) {
            squares += (value - mean) * (value - mean);
        }
        return Math.sqrt(squares / (size - 1) / size);
    }
}
