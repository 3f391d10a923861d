package steelyard.harness.report;

import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import steelyard.drills.model.Cause;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.Slices;

/**
 * The slices that the page draws, one entry each 100 ms. Times are in seconds, latencies in milliseconds (NaN where no
 * answer was good), shares and utilisations from 0 to 1.
 *
 * @param failed requests failed, by the word of the cause, in the file's order; only causes that occurred
 * @param perBackend in stage order
 */
record Columns(
        double[] from,
        double[] offered,
        double[] ok,
        Map<String, double[]> failed,
        double[] p50,
        double[] p95,
        double[] p99,
        double[] worst,
        double[] retries,
        List<PerBackend> perBackend) {
    static final double SECONDS = 0.1;

    /** Throws {@link IllegalArgumentException} when a column is missing. */
    static Columns of(Slices slices, List<BackendRow> backends) {
        return of(slices, backends, "");
    }

    /** The same of columns whose names have an ending: {@code :mean} in a forecast. */
    static Columns of(Slices slices, List<BackendRow> backends, String ending) {
        if (slices.rows() == 0) {
            return empty(backends);
        }
        return new Columns(
                slices.numbers("from"),
                slices.numbers("offered" + ending),
                slices.numbers("ok" + ending),
                failures(slices, ending),
                slices.numbers("p50_ms" + ending),
                slices.numbers("p95_ms" + ending),
                slices.numbers("p99_ms" + ending),
                slices.numbers("worst_ms" + ending),
                slices.numbers("retries" + ending),
                backends.stream()
                        .map(each -> PerBackend.of(slices, each.name(), ending))
                        .toList());
    }

    /** A play that was killed at once may have left no slices at all. */
    private static Columns empty(List<BackendRow> backends) {
        double[] none = {};
        PerBackend nothing = new PerBackend(none, none, List.of(), none, none, none, none);
        List<PerBackend> perBackend = backends.stream().map(each -> nothing).toList();
        return new Columns(none, none, none, Map.of(), none, none, none, none, none, perBackend);
    }

    private static Map<String, double[]> failures(Slices slices, String ending) {
        Map<String, double[]> failures = new LinkedHashMap<>();
        for (Cause cause : Cause.values()) {
            double[] counts = slices.numbers(cause.word() + ending);
            if (Arrays.stream(counts).anyMatch(count -> count > 0)) {
                failures.put(cause.word(), counts);
            }
        }
        return failures;
    }

    int size() {
        return from.length;
    }

    /** What the slices say of one backend. */
    record PerBackend(
            double[] picked,
            double[] inFlight,
            List<String> standing,
            double[] weight,
            double[] entitled,
            double[] utilisation,
            double[] waiting) {
        static PerBackend of(Slices slices, String name, String ending) {
            return new PerBackend(
                    slices.numbers(name, "picked" + ending),
                    slices.numbers(name, "in-flight" + ending),
                    slices.standing(name),
                    slices.numbers(name, "weight" + ending),
                    slices.numbers(name, "entitled" + ending),
                    slices.numbers(name, "utilisation" + ending),
                    slices.numbers(name, "waiting" + ending));
        }

        PerBackend withPicked(double[] other) {
            return new PerBackend(other, inFlight, standing, weight, entitled, utilisation, waiting);
        }
    }
}
