package steelyard.harness.record;

import java.util.stream.Collectors;
import steelyard.drills.model.Measure.Unit;
import steelyard.drills.model.Serves;

/** How a backend serves, as a person reads it. */
final class ServesWords {
    private ServesWords() {}

    static String of(Serves serves) {
        return Wording.count(serves.workers(), "worker", "workers") + ", queue " + serves.queue() + ", "
                + time(serves.time())
                + (serves.cold() == null ? "" : cold(serves.cold()))
                + (serves.gauges().isEmpty() ? "" : gauges(serves))
                + (serves.probesQueue() ? ", probes queue" : "")
                + (serves.probeLoss() > 0 ? ", probes lost " + Wording.exact(Unit.SHARE, serves.probeLoss()) : "");
    }

    private static String time(Serves.Time time) {
        String first = time.law().word() + " " + Wording.duration(time.firstNanos());
        return switch (time.law()) {
            case FIXED, EXPONENTIAL -> first;
            case LOGNORMAL -> first + " median, 99 % " + Wording.duration(time.p99Nanos());
            case GAMMA -> first + " mean, shape " + Wording.exact(Unit.NUMBER, time.shape());
            case TRACE -> trace(time);
        };
    }

    private static String trace(Serves.Time time) {
        return time.trace() == null
                ? "trace"
                : "trace of " + Wording.count(time.trace().nanos().size(), "time", "times") + ", "
                        + time.trace().order().word();
    }

    private static String cold(Serves.Cold cold) {
        return ", cold " + Wording.exact(Unit.NUMBER, cold.factor()) + " times for "
                + Wording.duration(cold.decayNanos());
    }

    private static String gauges(Serves serves) {
        return serves.gauges().stream().map(ServesWords::gauge).collect(Collectors.joining(", ", ", gauges ", ""));
    }

    private static String gauge(Serves.Gauge gauge) {
        String each = gauge.each() == 0 ? "" : " and " + Wording.exact(Unit.SHARE, gauge.each()) + " a request";
        return gauge.name() + " " + Wording.exact(Unit.SHARE, gauge.base()) + each;
    }
}
