package steelyard.harness.report;

import java.util.ArrayList;
import java.util.List;
import java.util.stream.IntStream;
import steelyard.balancer.core.standing.Standing;
import steelyard.harness.record.Words;
import steelyard.harness.report.Columns.PerBackend;

/**
 * When a pool was in its last resort, as the samples at the ends of slices tell: a backend that is down or benched was
 * entitled to a share all the same. Plays of a forecast are not told of, since its columns are medians, each of its own.
 */
final class LastResort {
    private static final List<String> ILL = List.of(Words.of(Standing.DOWN), Words.of(Standing.BENCHED));

    private LastResort() {}

    /** A stretch from the first sample to the last one that found it so, in seconds. */
    record Stretch(String pool, double from, double to) {}

    /** Pool by pool, in order of time. */
    static List<Stretch> of(RunFiles run) {
        List<Stretch> stretches = new ArrayList<>();
        for (String pool : run.run().forecast() == null ? run.pools() : List.<String>of()) {
            ofPool(run, pool, stretches);
        }
        return stretches;
    }

    /** Empty where no pool came to it. */
    static String html(RunFiles run) {
        List<Stretch> stretches = of(run);
        if (stretches.isEmpty()) {
            return "";
        }
        boolean one = run.pools().size() == 1;
        Html html = new Html();
        html.raw("<p>Last resort, so that every admitted backend was picked from, as seen each 100 ms: ");
        List<String> spans = stretches.stream()
                .map(each -> (one ? "" : "pool " + each.pool() + " ") + "from " + Figures.seconds(each.from()) + " to "
                        + Figures.seconds(each.to()))
                .toList();
        return html.raw(Html.text(String.join("; ", spans))).raw(".</p>\n").toString();
    }

    private static void ofPool(RunFiles run, String pool, List<Stretch> stretches) {
        List<PerBackend> own = IntStream.range(0, run.backends().size())
                .filter(each -> run.backends().get(each).pool().equals(pool))
                .mapToObj(each -> run.columns().perBackend().get(each))
                .toList();
        double[] from = run.columns().from();
        int begun = -1;
        for (int slice = 0; slice < from.length; slice++) {
            boolean in = found(own, slice);
            begun = in && begun < 0 ? slice : begun;
            if (begun >= 0 && (!in || slice + 1 == from.length)) {
                int last = in ? slice : slice - 1;
                stretches.add(new Stretch(pool, from[begun] + Columns.SECONDS, from[last] + Columns.SECONDS));
                begun = -1;
            }
        }
    }

    private static boolean found(List<PerBackend> backends, int slice) {
        return backends.stream()
                .anyMatch(each -> each.entitled()[slice] > 0
                        && ILL.contains(each.standing().get(slice)));
    }
}
