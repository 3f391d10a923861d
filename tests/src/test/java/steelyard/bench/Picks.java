package steelyard.bench;

import java.util.Collection;
import java.util.Locale;
import java.util.Map;
import java.util.TreeMap;
import org.openjdk.jmh.profile.GCProfiler;
import org.openjdk.jmh.results.RunResult;
import org.openjdk.jmh.runner.Runner;
import org.openjdk.jmh.runner.RunnerException;
import org.openjdk.jmh.runner.options.OptionsBuilder;
import org.openjdk.jmh.runner.options.VerboseMode;

/**
 * Runs {@link PicksBench} and prints what a pick costs, as nanoseconds, as a ratio to an atomic increment of the same run,
 * and in bytes allocated. Closes with {@code name: value} lines: the worst growth from 16 to 10,000 backends over that of
 * log2 (3.3), but for rendezvous hashing, which looks at everybody by its nature; and the most bytes a pick.
 */
public final class Picks {
    private static final int FEW = 16;
    private static final int MANY = 10_000;

    private Picks() {}

    /** The benchmark's entry; takes no arguments. */
    public static void main(String[] args) throws RunnerException {
        Collection<RunResult> results = new Runner(new OptionsBuilder()
                        .include(PicksBench.class.getName())
                        .addProfiler(GCProfiler.class)
                        .verbosity(VerboseMode.SILENT)
                        .build())
                .run();
        double atomic = 0;
        double mostBytes = 0;
        Map<String, Map<Integer, Double>> cost = new TreeMap<>();
        for (RunResult result : results) {
            double nanos = result.getPrimaryResult().getScore();
            String method = result.getParams().getParam("method");
            if (method == null || method.isEmpty()) {
                atomic = nanos;
                continue;
            }
            int backends = Integer.parseInt(result.getParams().getParam("backends"));
            cost.computeIfAbsent(method, m -> new TreeMap<>()).put(backends, nanos);
            mostBytes = Math.max(
                    mostBytes,
                    result.getSecondaryResults().get("gc.alloc.rate.norm").getScore());
        }
        print(cost, atomic);
        cost.remove("hash rendezvous");
        double growth = cost.values().stream()
                .mapToDouble(c -> c.get(MANY) / c.get(FEW) / (Math.log(MANY) / Math.log(FEW)))
                .max()
                .orElseThrow();
        say("worst-growth-over-log: %.2f", growth);
        say("most-bytes-a-pick: %.2f", mostBytes);
    }

    private static void print(Map<String, Map<Integer, Double>> cost, double atomic) {
        say("%-22s %9s %9s %16s", "method", "backends", "ns/pick", "atomic increments");
        say("%-22s %9s %9.1f %16.1f", "(atomic increment)", "", atomic, 1.0);
        cost.forEach((method, byBackends) -> byBackends.forEach(
                (backends, nanos) -> say("%-22s %9d %9.1f %16.1f", method, backends, nanos, nanos / atomic)));
    }

    private static void say(String format, Object... values) {
        System.out.println(String.format(Locale.ROOT, format, values));
    }
}
