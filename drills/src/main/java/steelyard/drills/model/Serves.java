package steelyard.drills.model;

import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * How a backend serves.
 *
 * @param workers requests in service at once, at least 1
 * @param queue requests that may wait beside those; one more gets 503
 * @param time the service time
 * @param bodyBytes size of an ordinary answer
 * @param probesQueue whether a probe takes a worker like any request
 * @param probeLoss chance of each http probe to be lost: read, and never answered; from 0 to 1
 * @param answers folder of mapping files that make the answers, as the reader resolved it, or null
 * @param cold how it serves after a revive, or null for as ever
 * @param gauges those of its load page beside cpu, each once
 */
public record Serves(
        int workers,
        int queue,
        Time time,
        int bodyBytes,
        boolean probesQueue,
        double probeLoss,
        @Nullable String answers,
        @Nullable Cold cold,
        List<Gauge> gauges) {
    /** The gauge that follows the work done and can neither be set nor scripted: the busy share of the last second. */
    public static final String CPU = "cpu";

    /** The gauge that a {@code fill} cue sets. */
    public static final String DISK = "disk";

    public Serves {
        gauges = List.copyOf(gauges);
        Check.positive(workers, "workers");
        Check.notNegative(queue, "queue");
        Check.notNegative(bodyBytes, "body");
        Check.share(probeLoss, "probe-loss");
        Check.that(gauges.stream().map(Gauge::name).distinct().count() == gauges.size(), "a gauge is there twice");
        Check.that(gauges.stream().noneMatch(gauge -> gauge.name().equals(CPU)), "the gauge cpu follows the work");
    }

    /** Without cold caches, and with no gauge but cpu. */
    public Serves(
            int workers,
            int queue,
            Time time,
            int bodyBytes,
            boolean probesQueue,
            double probeLoss,
            @Nullable String answers) {
        this(workers, queue, time, bodyBytes, probesQueue, probeLoss, answers, null, List.of());
    }

    /**
     * Cold caches after a revive: the service time is multiplied by {@code 1 + (factor - 1) x exp(-t / decay)}, t since
     * the revive.
     *
     * @param factor at the revive, at least 1
     * @param decayNanos how fast they warm, above zero
     */
    public record Cold(double factor, long decayNanos) {
        public Cold {
            Check.that(factor >= 1, "factor is at least 1, not %s", factor);
            Check.positive(decayNanos, "decay");
        }
    }

    /**
     * A utilisation that the load page shows: base, and more for each request in service or waiting, at most 1.
     *
     * @param base from 0 to 1
     * @param each for one request, from 0 to 1
     */
    public record Gauge(String name, double base, double each) {
        public Gauge {
            Check.share(base, "base of " + name);
            Check.share(each, "each of " + name);
        }
    }

    /**
     * A service time law.
     *
     * @param firstNanos the fixed time, the mean, or the median; 0 of a trace
     * @param p99Nanos the 99 % quantile of a lognormal law, otherwise 0
     * @param shape of a gamma law, above zero, otherwise 0
     * @param trace of the trace law, and no other
     */
    public record Time(
            Law law,
            long firstNanos,
            long p99Nanos,
            double shape,
            @Nullable Trace trace) {
        public Time {
            Check.that((law == Law.TRACE) == (trace != null), "a trace, and no other law, has recorded times");
            Check.that(trace == null ? firstNanos > 0 : firstNanos == 0, "time %d ns", firstNanos);
            Check.that(
                    law == Law.LOGNORMAL ? p99Nanos > firstNanos : p99Nanos == 0,
                    "a lognormal time, and no other, has a 99 %% quantile above its median");
            Check.that(law == Law.GAMMA ? shape > 0 : shape == 0, "a gamma time, and no other, has a shape above zero");
        }

        public static Time fixed(long nanos) {
            return new Time(Law.FIXED, nanos, 0, 0, null);
        }

        public static Time exponential(long meanNanos) {
            return new Time(Law.EXPONENTIAL, meanNanos, 0, 0, null);
        }

        public static Time lognormal(long medianNanos, long p99Nanos) {
            return new Time(Law.LOGNORMAL, medianNanos, p99Nanos, 0, null);
        }

        public static Time gamma(long meanNanos, double shape) {
            return new Time(Law.GAMMA, meanNanos, 0, shape, null);
        }

        public static Time trace(Trace trace) {
            return new Time(Law.TRACE, 0, 0, 0, trace);
        }
    }

    /** The laws that a service time may follow. */
    public enum Law implements Worded {
        FIXED("fixed"),
        EXPONENTIAL("exponential"),
        LOGNORMAL("lognormal"),
        GAMMA("gamma"),
        TRACE("trace");

        private final String word;

        Law(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }
}
