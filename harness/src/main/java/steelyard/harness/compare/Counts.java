package steelyard.harness.compare;

import java.util.Optional;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import steelyard.harness.record.RunData;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.RunData.FindingRow;

/**
 * A share of a single run as so many out of so many, added up from its slices.
 *
 * @param hits at most {@code of}
 * @param of above zero
 */
record Counts(int hits, int of) {
    private static final String DURATION = "([0-9.]+) (ms|s)";
    private static final Pattern WINDOW = Pattern.compile("from " + DURATION + " to " + DURATION);
    private static final double SLICE_SECONDS = 0.1;
    private static final double ROUNDING = 1e-6;

    /** Those of a measure; empty when slices do not hold them, or do not add up to the measure's value. */
    static Optional<Counts> of(RunData run, FindingRow row) {
        int comma = row.text().lastIndexOf(", ");
        if (comma < 0) {
            return Optional.empty();
        }
        String what = row.text().substring(0, comma);
        int[] slices = slices(row.text().substring(comma + 2), run.slices().rows());
        if (slices.length == 0) {
            return Optional.empty();
        }
        Optional<Counts> counts = what.equals("failed")
                ? counted(sum(run, "failed", slices), sum(run, "offered", slices))
                : picked(run, what, slices);
        return counts.filter(each -> Math.abs((double) each.hits / each.of - row.value()) <= ROUNDING);
    }

    private static Optional<Counts> picked(RunData run, String what, int[] slices) {
        for (BackendRow backend : run.backends()) {
            if (what.equals("share of " + backend.name())) {
                double all = run.backends().stream()
                        .filter(each -> each.pool().equals(backend.pool()))
                        .mapToDouble(each -> sum(run, each.name() + ":picked", slices))
                        .sum();
                return counted(sum(run, backend.name() + ":picked", slices), all);
            }
        }
        return Optional.empty();
    }

    private static Optional<Counts> counted(double hits, double of) {
        boolean usable = hits >= 0 && of >= 1 && hits <= of && of <= Integer.MAX_VALUE;
        return usable ? Optional.of(new Counts((int) hits, (int) of)) : Optional.empty();
    }

    private static double sum(RunData run, String column, int[] slices) {
        double[] values = run.slices().numbers(column);
        double sum = 0;
        for (int slice = slices[0]; slice < slices[1]; slice++) {
            sum += values[slice];
        }
        return sum;
    }

    /** The first slice of a window, and the one behind its last; empty when it does not begin and end with slices. */
    private static int[] slices(String window, int all) {
        if (window.equals("whole play")) {
            return new int[] {0, all};
        }
        Matcher matcher = WINDOW.matcher(window);
        if (!matcher.matches()) {
            return new int[0];
        }
        double from = seconds(matcher.group(1), matcher.group(2)) / SLICE_SECONDS;
        double to = seconds(matcher.group(3), matcher.group(4)) / SLICE_SECONDS;
        boolean whole =
                Math.abs(from - StrictMath.rint(from)) < ROUNDING && Math.abs(to - StrictMath.rint(to)) < ROUNDING;
        int last = Math.min(all, (int) StrictMath.rint(to));
        return whole && StrictMath.rint(from) < last ? new int[] {(int) StrictMath.rint(from), last} : new int[0];
    }

    private static double seconds(String number, String unit) {
        return Double.parseDouble(number) * (unit.equals("ms") ? 0.001 : 1);
    }
}
