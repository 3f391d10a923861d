package steelyard.harness.record;

import java.util.List;
import java.util.Map;

/**
 * The slices of a run, column by column, as {@code slices.csv} has them: 100 ms each, from the start of the play.
 */
public final class Slices {
    private final int rows;
    private final Map<String, double[]> numbers;
    private final Map<String, String[]> words;

    Slices(int rows, Map<String, double[]> numbers, Map<String, String[]> words) {
        this.rows = rows;
        this.numbers = numbers;
        this.words = words;
    }

    public int rows() {
        return rows;
    }

    /**
     * A column of numbers; NaN where the field is empty. Throws {@link IllegalArgumentException} for an unknown one.
     *
     * @param column {@code offered}, {@code p99_ms}, a cause ...
     */
    public double[] numbers(String column) {
        double[] values = numbers.get(column);
        if (values == null) {
            throw new IllegalArgumentException("no column of numbers " + column);
        }
        return values;
    }

    /** Whether there is such a column of numbers. */
    public boolean has(String column) {
        return numbers.containsKey(column);
    }

    /** A column of one backend: {@code picked}, {@code in-flight}, {@code weight} ... */
    public double[] numbers(String backend, String column) {
        return numbers(backend + ":" + column);
    }

    /** The standing of a backend at the end of each slice, in words. */
    public List<String> standing(String backend) {
        String[] values = words.get(backend + ":standing");
        if (values == null) {
            throw new IllegalArgumentException("no standing of " + backend);
        }
        return List.of(values);
    }
}
