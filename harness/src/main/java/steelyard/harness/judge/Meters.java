package steelyard.harness.judge;

import java.util.ArrayList;
import java.util.List;
import java.util.Objects;
import java.util.stream.IntStream;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Expectation.Options;
import steelyard.harness.record.Cast;

/** Makes the meter of an expectation; those of one window share their counts of picks, and their latencies. */
final class Meters {
    private final Drill drill;
    private final Cast cast;
    private final List<WindowPicks> picks = new ArrayList<>();
    private final List<WindowLatencies> latencies = new ArrayList<>();

    Meters(Drill drill, Cast cast) {
        this.drill = drill;
        this.cast = cast;
    }

    /** The counts of picks that meters made so far read from. */
    WindowPicks[] picks() {
        return picks.toArray(WindowPicks[]::new);
    }

    /** The latencies that meters made so far read from. */
    WindowLatencies[] latencies() {
        return latencies.toArray(WindowLatencies[]::new);
    }

    Meter of(Expectation expectation) {
        Window window = new Window(expectation.fromNanos(), expectation.toNanos());
        Options options = expectation.options();
        int[] members = members(expectation);
        return switch (expectation.measure()) {
            case FAILED -> new Failed(window, traffic(expectation), options.causes(), options.worstNanos());
            case LONGEST_OUTAGE -> new LongestOutage(window, traffic(expectation), options.outageShare());
            case LATENCY -> new Latency(latenciesOf(window, traffic(expectation)), options.quantile());
            case SHARE -> new Share(picksOf(window), members, cast);
            case FAIRNESS -> new Fairness(picksOf(window), members, cast);
            case DETECTED_IN -> new DetectedIn(after(expectation), members, cast, options.until());
            case SHIFTED_IN -> new ShiftedIn(after(expectation), members, cast);
            case SETTLED_IN -> new SettledIn(after(expectation), members, cast);
            case DRAINED_IN -> new DrainedIn(after(expectation), members, cast);
            case CUT -> new Cut(window, backends(members));
            case STANDING_CHANGES ->
                new StandingChanges(
                        window,
                        members,
                        expectation.of() == null,
                        options.shown(),
                        cast.backends().size());
            case RETRY_LOAD -> new RetryLoad(window, pools(expectation), options.worstNanos());
            case PEAK_IN_FLIGHT -> new PeakInFlight(window, backends(members), expectation.of() == null);
            case WEIGHT_LAG -> new WeightLag(window, members, cast);
            case SWING -> new Swing(window, members, cast);
            case PEAK_UTILISATION -> new PeakUtilisation(window, members, cast);
        };
    }

    /** The backends looked at: the target's, else those of the cue that time counts from, else all. */
    private int[] members(Expectation expectation) {
        if (expectation.of() != null) {
            return cast.numbers(expectation.of());
        }
        if (expectation.after() != null) {
            return drill.cue(expectation.after())
                    .map(cue -> cast.numbers(cue.target()))
                    .orElseGet(() -> new int[0]);
        }
        return IntStream.range(0, cast.backends().size()).toArray();
    }

    private WindowPicks picksOf(Window window) {
        for (WindowPicks each : picks) {
            if (each.window().equals(window)) {
                return each;
            }
        }
        WindowPicks fresh = new WindowPicks(window, cast);
        picks.add(fresh);
        return fresh;
    }

    private WindowLatencies latenciesOf(Window window, boolean[] trafficCounts) {
        for (WindowLatencies each : latencies) {
            if (each.isOf(window, trafficCounts)) {
                return each;
            }
        }
        WindowLatencies fresh = new WindowLatencies(window, trafficCounts);
        latencies.add(fresh);
        return fresh;
    }

    private boolean[] backends(int[] members) {
        boolean[] counts = new boolean[cast.backends().size()];
        for (int backend : members) {
            counts[backend] = true;
        }
        return counts;
    }

    /** By pool: whether its requests are looked at. */
    private boolean[] pools(Expectation expectation) {
        boolean[] counts = new boolean[cast.pools().size()];
        for (int pool = 0; pool < counts.length; pool++) {
            counts[pool] =
                    expectation.pool() == null || cast.pools().get(pool).name().equals(expectation.pool());
        }
        return counts;
    }

    /** By traffic stream: whether its requests are looked at. */
    private boolean[] traffic(Expectation expectation) {
        boolean[] ofPool = pools(expectation);
        boolean[] counts = new boolean[drill.traffic().size()];
        for (int stream = 0; stream < counts.length; stream++) {
            counts[stream] = ofPool[cast.poolNumber(drill.traffic().get(stream).pool())];
        }
        return counts;
    }

    private static String after(Expectation expectation) {
        return Objects.requireNonNull(expectation.after(), "a measure that counts from a cue has one");
    }
}
