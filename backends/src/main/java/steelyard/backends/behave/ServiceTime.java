package steelyard.backends.behave;

import java.util.Arrays;
import java.util.Objects;
import org.jspecify.annotations.Nullable;

/**
 * How much work a request asks of a backend, as nanoseconds of one worker.
 *
 * <p>The demand depends on request and attempt alone, so one request asks the same of whichever backend it meets.
 * Demands are whole nanoseconds, at least 0 and at most {@link #LONGEST_NANOS}. Immutable, any thread.
 */
public sealed interface ServiceTime {

    /** No demand is longer: a day. A draw beyond it counts as a day, and a set time above it is refused. */
    long LONGEST_NANOS = 86_400_000_000_000L;

    /** The law, for switches that have to name every one. */
    enum Kind {
        FIXED,
        EXPONENTIAL,
        LOGNORMAL,
        GAMMA,
        TRACE
    }

    Kind kind();

    /** The demand of one attempt of one request, from draws of the key (SERVICE, request, attempt). */
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

    /**
     * Gamma: from mostly short (shape below 1) over exponential (1) to narrow round its mean (large shapes). With a whole shape
     * k it is Erlang's law of k phases.
     *
     * @param averageNanos its mean
     * @param shape above 0; the variance over the squared mean is 1 / shape
     */
    record Gamma(long averageNanos, double shape) implements ServiceTime {
        public Gamma {
            requireTime("gamma", averageNanos);
            if (!(shape > 0) || Double.isInfinite(shape)) {
                throw new IllegalArgumentException("gamma needs a shape above 0, but got " + shape);
            }
        }

        @Override
        public Kind kind() {
            return Kind.GAMMA;
        }

        @Override
        public long demandNanos(Chance chance, long request, int attempt) {
            return toNanos(averageNanos / shape * GammaDraws.draw(shape, chance, request, attempt));
        }

        @Override
        public double meanNanos() {
            return averageNanos;
        }

        @Override
        public double squaredVariation() {
            return 1 / shape;
        }
    }

    /** Which value of a trace a request takes. */
    enum Order {
        /** Any, each with the same chance, drawn by request and attempt. */
        SAMPLED,
        /** That of its number, from the start again after the last: every attempt of a request takes the same. */
        REPLAYED
    }

    /** Times that were measured somewhere, at least one. The array is copied on the way in and on the way out. */
    record Trace(long[] nanos, Order order) implements ServiceTime {
        public Trace {
            Objects.requireNonNull(order);
            nanos = nanos.clone();
            if (nanos.length == 0) {
                throw new IllegalArgumentException("a trace needs one time or more, but has none");
            }
            for (long one : nanos) {
                requireTime("traced", one);
            }
        }

        @Override
        public Kind kind() {
            return Kind.TRACE;
        }

        @Override
        public long[] nanos() {
            return nanos.clone();
        }

        @Override
        public long demandNanos(Chance chance, long request, int attempt) {
            return switch (order) {
                case SAMPLED -> nanos[(int) (nanos.length * chance.unit(Stream.SERVICE, request, attempt))];
                case REPLAYED -> nanos[(int) Math.floorMod(request, (long) nanos.length)];
            };
        }

        @Override
        public double meanNanos() {
            return Arrays.stream(nanos).average().orElseThrow();
        }

        @Override
        public double squaredVariation() {
            double mean = meanNanos();
            double variance = Arrays.stream(nanos)
                    .mapToDouble(one -> (one - mean) * (one - mean))
                    .average()
                    .orElseThrow();
            return mean == 0 ? 0 : variance / (mean * mean);
        }

        @Override
        public boolean equals(@Nullable Object other) {
            return other instanceof Trace that && order == that.order && Arrays.equals(nanos, that.nanos);
        }

        @Override
        public int hashCode() {
            return 31 * Arrays.hashCode(nanos) + order.hashCode();
        }

        @Override
        public String toString() {
            return "Trace[" + nanos.length + " times, " + order + "]";
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
