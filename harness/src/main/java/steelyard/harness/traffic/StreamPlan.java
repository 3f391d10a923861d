package steelyard.harness.traffic;

import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Stream;
import steelyard.drills.model.Traffic;
import steelyard.drills.model.Traffic.Arrivals;

/**
 * The arrivals of one traffic stream.
 *
 * <p>A change of time makes one rule of every rate: let the expected number of requests up to t be L(t); arrivals of a
 * Poisson stream come where L grows by unit exponentials (the time-change theorem; Cinlar, Introduction to Stochastic
 * Processes, 1975, section 4.7), those of an even stream where it grows by one, the first after one half. Steps, stretches
 * without traffic and a surge only bend L: what remains of a gap is kept in expected requests, so it is rescaled by
 * itself when the rate changes.
 */
final class StreamPlan {
    /** What {@link #dueNanos} says when nothing more is due. */
    static final long NEVER = Long.MAX_VALUE;

    private final Traffic traffic;
    private final int number;
    private final long lastsNanos;
    private final Chance chance;
    private final RateSteps steps;
    private final CumulativeTable mix;
    private final CumulativeTable clients;

    private double factor = 1;
    private long arrival;
    /** Up to here the gap has been used up; {@link #left} is what remains of it, in expected requests. */
    private double atNanos;

    private double left;
    private double exactDueNanos;
    private long dueNanos;

    StreamPlan(Traffic traffic, int number, long lastsNanos, Chance chance) {
        this.traffic = traffic;
        this.number = number;
        this.lastsNanos = lastsNanos;
        this.chance = chance;
        this.steps = new RateSteps(traffic.steps());
        this.mix = CumulativeTable.of(
                traffic.requests().stream().mapToDouble(Traffic.Request::share).toArray());
        this.clients = CumulativeTable.zipf(traffic.clients(), traffic.skew());
        this.left = gap();
        aim();
    }

    /** When the next request is due, or {@link #NEVER}. */
    long dueNanos() {
        return dueNanos;
    }

    /** Place of the next request in the mix. */
    int kind() {
        return mix.at(chance.unit(Stream.MIX, number, arrival));
    }

    /** Client that sends the next request. */
    int client() {
        return clients.at(chance.unit(Stream.CLIENT, number, arrival));
    }

    /** Goes on to the request after the next one. */
    void advance() {
        atNanos = exactDueNanos;
        arrival++;
        left = gap();
        aim();
    }

    /** From {@code nowNanos} on, every rate counts {@code newFactor} times. */
    void surge(double newFactor, long nowNanos) {
        if (nowNanos > atNanos) {
            left = Math.max(0, left - factor * steps.between(atNanos, nowNanos));
            atNanos = nowNanos;
        }
        factor = newFactor;
        aim();
    }

    private double gap() {
        if (traffic.arrivals() == Arrivals.POISSON) {
            return chance.exponential(Stream.ARRIVALS, number, arrival);
        }
        return arrival == 0 ? 0.5 : 1;
    }

    private void aim() {
        exactDueNanos = steps.after(atNanos, left, factor);
        double rounded = StrictMath.rint(exactDueNanos);
        dueNanos = rounded < lastsNanos ? (long) rounded : NEVER;
    }
}
