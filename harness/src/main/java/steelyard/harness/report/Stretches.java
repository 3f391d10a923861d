package steelyard.harness.report;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.RunData.CueRow;
import steelyard.harness.record.SliceLatencies;
import steelyard.harness.report.Columns.PerBackend;

/**
 * The stretches between cues. A cue splits the play at the slice in which it was applied; cues of one slice split it
 * once.
 */
final class Stretches {
    private final Columns slices;
    private final List<BackendRow> backends;
    private final SliceLatencies latencies;

    private Stretches(RunFiles run) {
        slices = run.sums();
        backends = run.backends();
        latencies = run.latencies();
    }

    static List<Stretch> of(RunFiles run) {
        TreeMap<Integer, List<String>> starts = new TreeMap<>();
        starts.put(0, new ArrayList<>());
        for (CueRow cue : run.run().cues()) {
            int slice = sliceOf(run.sums(), cue.at());
            if (slice < run.sums().size()) {
                starts.computeIfAbsent(slice, none -> new ArrayList<>()).add(cue.cue());
            }
        }
        Stretches stretches = new Stretches(run);
        List<Stretch> all = new ArrayList<>();
        for (Map.Entry<Integer, List<String>> start : starts.entrySet()) {
            Integer next = starts.higherKey(start.getKey());
            int end = next == null ? run.sums().size() : next;
            if (end > start.getKey()) {
                all.add(stretches.stretch(start.getKey(), end, start.getValue()));
            }
        }
        return all;
    }

    private static int sliceOf(Columns slices, double at) {
        int slice = 0;
        while (slice < slices.size() && slices.from()[slice] + Columns.SECONDS <= at + 1e-9) {
            slice++;
        }
        return slice;
    }

    private Stretch stretch(int from, int to, List<String> cues) {
        Map<String, Double> failed = new LinkedHashMap<>();
        slices.failed().forEach((cause, counts) -> failed.put(cause, sum(counts, from, to)));
        List<Part> parts = new ArrayList<>();
        for (int backend = 0; backend < backends.size(); backend++) {
            parts.add(part(backend, from, to));
        }
        return new Stretch(
                slices.from()[from],
                slices.from()[to - 1] + Columns.SECONDS,
                List.copyOf(cues),
                sum(slices.offered(), from, to),
                sum(slices.ok(), from, to),
                failed,
                quantile(0.5, slices.p50(), from, to),
                quantile(0.99, slices.p99(), from, to),
                parts);
    }

    private Part part(int backend, int from, int to) {
        PerBackend own = slices.perBackend().get(backend);
        double poolPicked = 0;
        for (int other = 0; other < backends.size(); other++) {
            if (backends.get(other).pool().equals(backends.get(backend).pool())) {
                poolPicked += sum(slices.perBackend().get(other).picked(), from, to);
            }
        }
        int length = to - from;
        return new Part(
                sum(own.picked(), from, to) / poolPicked,
                sum(own.entitled(), from, to) / length,
                sum(own.utilisation(), from, to) / length);
    }

    private static double sum(double[] values, int from, int to) {
        double sum = 0;
        for (int at = from; at < to; at++) {
            sum += Double.isNaN(values[at]) ? 0 : values[at];
        }
        return sum;
    }

    private double quantile(double share, double[] quantiles, int from, int to) {
        return latencies.known() ? latencies.quantile(from, to, share) / 1e6 : weighted(quantiles, from, to);
    }

    private double weighted(double[] quantiles, int from, int to) {
        double sum = 0;
        double weights = 0;
        for (int at = from; at < to; at++) {
            if (!Double.isNaN(quantiles[at])) {
                sum += quantiles[at] * slices.ok()[at];
                weights += slices.ok()[at];
            }
        }
        return sum / weights;
    }

    /**
     * What happened between two cues. Times in seconds; a quantile in milliseconds is that of its good answers,
     * or, where only slices are known, the mean of their own, weighted by their good answers.
     *
     * @param cues the names of the cues that opened it; empty for the first
     * @param failed by cause, for causes that occurred in the play
     * @param parts one a backend, in list order
     */
    record Stretch(
            double from,
            double to,
            List<String> cues,
            double offered,
            double ok,
            Map<String, Double> failed,
            double p50,
            double p99,
            List<Part> parts) {}

    /** A backend's part in a stretch; each from 0 to 1. The share is NaN when its pool had no attempt. */
    record Part(double share, double entitled, double utilisation) {}
}
