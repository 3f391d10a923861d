package steelyard.backends.behave;

/**
 * Work that a route adds to the drawn demand of its requests: a fixed part, and one drawn uniformly, lognormally or not
 * at all. Drawn by request and attempt, apart from the demand itself. Immutable, any thread.
 *
 * @param fixedNanos always added, 0 to a day
 * @param law how the drawn part is spread
 * @param first uniform: the least, lognormal: the median, in nanoseconds
 * @param second uniform: the most, in nanoseconds; lognormal: standard deviation of the logarithm
 */
public record RouteDelay(long fixedNanos, Law law, double first, double second) {

    /** How the drawn part is spread. */
    public enum Law {
        NONE,
        UNIFORM,
        LOGNORMAL
    }

    /** Adds nothing. */
    public static final RouteDelay NOTHING = new RouteDelay(0, Law.NONE, 0, 0);

    /** Sets these draws apart from the demand, whose second key is the bare attempt. */
    private static final long OF_ROUTE = 1L << 32;

    public RouteDelay {
        if (fixedNanos < 0 || fixedNanos > ServiceTime.LONGEST_NANOS || !(first >= 0) || !(second >= 0)) {
            throw new IllegalArgumentException("a delay must be 0 or more, and a fixed one at most a day");
        }
        if (law == Law.UNIFORM && second < first) {
            throw new IllegalArgumentException("a uniform delay needs lower <= upper");
        }
    }

    /** What is added to one attempt of one request, 0 to a day. */
    public long nanos(Chance chance, long request, int attempt) {
        double drawn = switch (law) {
            case NONE -> 0;
            case UNIFORM -> first + (second - first) * chance.unit(Stream.SERVICE, request, OF_ROUTE + attempt);
            case LOGNORMAL ->
                first * StrictMath.exp(second * chance.normal(Stream.SERVICE, request, OF_ROUTE + attempt));
        };
        return (long) Math.min(ServiceTime.LONGEST_NANOS, fixedNanos + StrictMath.rint(drawn));
    }
}
