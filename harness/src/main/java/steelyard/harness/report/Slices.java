package steelyard.harness.report;

import java.io.IOException;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import steelyard.harness.report.RunFiles.Backend;

/**
 * {@code slices.csv} by column, one entry a slice of 100 ms. Times are in seconds, latencies in milliseconds (NaN where
 * no answer was good), shares and utilisations from 0 to 1.
 *
 * @param failed requests failed, by the word of the cause, in the file's order; only causes that occurred
 * @param perBackend in the order of {@code backends}
 */
record Slices(
        double[] from,
        double[] offered,
        double[] ok,
        Map<String, double[]> failed,
        double[] p50,
        double[] p95,
        double[] p99,
        double[] worst,
        double[] retries,
        List<Backend> backends,
        List<PerBackend> perBackend) {
    static final double SECONDS = 0.1;

    private static final List<String> CAUSES = List.of(
            "refused",
            "reset",
            "timed-out",
            "no-backend",
            "bad-gateway",
            "gateway-timeout",
            "backend-error",
            "cut",
            "gave-up");

    static Slices of(CsvTable table, List<Backend> backends) throws IOException {
        List<PerBackend> perBackend = new ArrayList<>();
        for (Backend backend : backends) {
            perBackend.add(PerBackend.of(table, backend.name()));
        }
        return new Slices(
                table.numbers("from"),
                table.numbers("offered"),
                table.numbers("ok"),
                failures(table),
                table.numbers("p50_ms"),
                table.numbers("p95_ms"),
                table.numbers("p99_ms"),
                table.numbers("worst_ms"),
                table.numbers("retries"),
                backends,
                perBackend);
    }

    private static Map<String, double[]> failures(CsvTable table) throws IOException {
        Map<String, double[]> failures = new LinkedHashMap<>();
        for (String cause : CAUSES) {
            double[] counts = table.numbers(cause);
            for (double count : counts) {
                if (count > 0) {
                    failures.put(cause, counts);
                    break;
                }
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
        static PerBackend of(CsvTable table, String name) throws IOException {
            return new PerBackend(
                    table.numbers(name + ":picked"),
                    table.numbers(name + ":in-flight"),
                    table.words(name + ":standing"),
                    table.numbers(name + ":weight"),
                    table.numbers(name + ":entitled"),
                    table.numbers(name + ":utilisation"),
                    table.numbers(name + ":waiting"));
        }
    }
}
