package steelyard.backends.behave;

/**
 * How much work a request asks of a backend, as nanoseconds of one worker.
 *
 * <p>The demand is drawn by request and attempt alone, so one request asks the same of whichever backend it meets.
 * Demands are whole nanoseconds, at least 0 and at most {@link #LONGEST_NANOS}. Immutable, any thread.
 */
public sealed interface ServiceTime {

    /** No demand is longer: a day. A draw beyond it counts as a day, and a set time above it is refused. */
    long LONGEST_NANOS = 86_400_000_000_000L;

    /** The law, for switches that have to name every one. */
    enum Kind {
        FIXED,
        EXPONENTIAL,
        LOGNORMAL
    }

    Kind kind();

    /** The demand of one attempt of one request, from the draw (SERVICE, request, attempt). */
    long demandNanos(Chance chance, long request, int attempt);

    /** The mean of the law. */
    double meanNanos();

    /** Variance over squared mean: 0 for a constant, 1 for an exponential. */
    double squaredVariation();

    /** The same for every request. */
    record Fixed(long nanos) implements ServiceTime {
        public Fixed {
            requireTime("fixed", nanos);
        }

        @Override
        public Kind kind() {
            return Kind.FIXED;
        }

        @Override
        public long demandNanos(Chance chance, long request, int attempt) {
            return nanos;
        }

        @Override
        public double meanNanos() {
            return nanos;
        }

        @Override
        public double squaredVariation() {
            return 0;
        }
    }

    /** Exponential: many short, some long. */
    record Exponential(long averageNanos) implements ServiceTime {
        public Exponential {
            requireTime("exponential", averageNanos);
        }

        @Override
        public Kind kind() {
            return Kind.EXPONENTIAL;
        }

        @Override
        public long demandNanos(Chance chance, long request, int attempt) {
            return toNanos(averageNanos * chance.exponential(Stream.SERVICE, request, attempt));
        }

        @Override
        public double meanNanos() {
            return averageNanos;
        }

        @Override
        public double squaredVariation() {
            return 1;
        }
    }

    /**
     * Lognormal, given as a person reads it off a latency chart: by its median and its 99 % quantile.
     *
     * @param sigma standard deviation of the logarithm, which the other two give
     */
    record Lognormal(long medianNanos, long high99Nanos, double sigma) implements ServiceTime {

        /** The 99 % quantile of the standard normal law. */
        private static final double NORMAL_99 = 2.3263478740408408;

        public Lognormal {
            requireTime("lognormal median", medianNanos);
            requireTime("lognormal 99%", high99Nanos);
            if (medianNanos == 0 || high99Nanos < medianNanos) {
                throw new IllegalArgumentException("lognormal needs 0 < median <= 99%, but got median " + medianNanos
                        + " ns and 99% " + high99Nanos + " ns");
            }
            if (sigma != sigma(medianNanos, high99Nanos)) {
                throw new IllegalArgumentException("sigma " + sigma + " is not what median and 99% give");
            }
        }

        public Lognormal(long medianNanos, long high99Nanos) {
            this(medianNanos, high99Nanos, sigma(medianNanos, high99Nanos));
        }

        private static double sigma(long medianNanos, long high99Nanos) {
            return StrictMath.log((double) high99Nanos / medianNanos) / NORMAL_99;
        }

        @Override
        public Kind kind() {
            return Kind.LOGNORMAL;
        }

        @Override
        public long demandNanos(Chance chance, long request, int attempt) {
            return toNanos(medianNanos * StrictMath.exp(sigma * chance.normal(Stream.SERVICE, request, attempt)));
        }

        @Override
        public double meanNanos() {
            return medianNanos * StrictMath.exp(sigma * sigma / 2);
        }

        @Override
        public double squaredVariation() {
            return StrictMath.expm1(sigma * sigma);
        }
    }

    private static void requireTime(String what, long nanos) {
        if (nanos < 0 || nanos > LONGEST_NANOS) {
            throw new IllegalArgumentException(
                    what + " service time must be between 0 and a day, but is " + nanos + " ns");
        }
    }

    private static long toNanos(double nanos) {
        return Math.min(LONGEST_NANOS, StrictMath.round(nanos));
    }
}
