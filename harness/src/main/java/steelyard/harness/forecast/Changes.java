package steelyard.harness.forecast;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;

/**
 * Changes of standing over plays: the first, second ... time that a backend went from one standing to another for one
 * cause, in how many plays it came to that, and when. At most {@value #MOST_TIMES} times are told apart.
 */
final class Changes {
    static final int MOST_TIMES = 20;

    private final Map<Kind, List<Double>> instants = new HashMap<>();

    /** A change that plays have in common; {@code time} counts from 1. */
    record Kind(int backend, Standing from, Standing to, Transition.Cause cause, int time) {}

    /** Where a change lies over the plays that had it, in nanoseconds of play time. */
    record Change(Kind kind, Spread at) {}

    void add(List<Transition> play) {
        Map<Kind, Integer> times = new HashMap<>();
        for (Transition each : play) {
            Kind first = new Kind(each.backend(), each.from(), each.to(), each.cause(), 1);
            int time = times.merge(first, 1, Integer::sum);
            if (time <= MOST_TIMES) {
                Kind kind = new Kind(each.backend(), each.from(), each.to(), each.cause(), time);
                instants.computeIfAbsent(kind, none -> new ArrayList<>()).add((double) each.atNanos());
            }
        }
    }

    /** By the median of their instants, then by backend, then as they are told apart. */
    List<Change> inOrder() {
        return instants.entrySet().stream()
                .map(each -> new Change(
                        each.getKey(),
                        Spread.of(each.getValue().stream()
                                .mapToDouble(Double::doubleValue)
                                .toArray())))
                .sorted(Comparator.comparingDouble((Change each) -> each.at().median())
                        .thenComparingInt(each -> each.kind().backend())
                        .thenComparingInt(each -> each.kind().time())
                        .thenComparing(each -> each.kind().from())
                        .thenComparing(each -> each.kind().to())
                        .thenComparing(each -> each.kind().cause()))
                .toList();
    }
}
