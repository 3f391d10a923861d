package steelyard.drills.model;

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
 */
public record Serves(
        int workers,
        int queue,
        Time time,
        int bodyBytes,
        boolean probesQueue,
        double probeLoss,
        @Nullable String answers) {
    public Serves {
        Check.positive(workers, "workers");
        Check.notNegative(queue, "queue");
        Check.notNegative(bodyBytes, "body");
        Check.share(probeLoss, "probe-loss");
    }

    /**
     * A service time law.
     *
     * @param firstNanos the fixed time, the mean, or the median
     * @param p99Nanos the 99 % quantile of a lognormal law, otherwise 0
     */
    public record Time(Law law, long firstNanos, long p99Nanos) {
        public Time {
            Check.positive(firstNanos, "time");
            Check.that(
                    law == Law.LOGNORMAL ? p99Nanos > firstNanos : p99Nanos == 0,
                    "a lognormal time, and no other, has a 99 %% quantile above its median");
        }

        public static Time fixed(long nanos) {
            return new Time(Law.FIXED, nanos, 0);
        }

        public static Time exponential(long meanNanos) {
            return new Time(Law.EXPONENTIAL, meanNanos, 0);
        }

        public static Time lognormal(long medianNanos, long p99Nanos) {
            return new Time(Law.LOGNORMAL, medianNanos, p99Nanos);
        }
    }

    /** The laws that a service time may follow. */
    public enum Law implements Worded {
        FIXED("fixed"),
        EXPONENTIAL("exponential"),
        LOGNORMAL("lognormal");

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
