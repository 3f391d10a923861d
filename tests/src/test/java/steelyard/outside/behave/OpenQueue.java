package steelyard.outside.behave;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Map;
import steelyard.backends.behave.Behaviour;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Figures;
import steelyard.backends.behave.Reply;
import steelyard.backends.behave.ReplySink;
import steelyard.backends.behave.Stream;

/**
 * Poisson arrivals into one behaviour, driven directly in virtual time: empty at the start, a warm-up of at least
 * 20/(1 - rho)^2 mean service times dropped, then so many arrivals measured. Where a queue limit makes any load stable, the
 * warm-up is that of rho = 0.95 at most.
 */
final class OpenQueue implements ReplySink {

    static final long MEAN_SERVICE_NANOS = 1_000_000_000L;

    private static final double LOAD_OF_LONGEST_WARM_UP = 0.95;

    private final Behaviour behaviour;
    private final Chance chance;
    private final int workers;
    private final double load;
    private long request;
    private long held;
    private long foundAllBusy;
    private double atNanos;

    private OpenQueue(BehaviourSettings settings, double load, long seed) {
        this.chance = new Chance(seed);
        this.behaviour = new Behaviour(0, settings, chance, 0);
        this.workers = settings.workers();
        this.load = load;
    }

    /** What was measured; times in mean service times. */
    record Measured(double meanWait, double shareThatWaits, double rejectShare, double utilisation) {}

    /** @param load arrivals in one mean service time */
    static Measured run(BehaviourSettings settings, double load, long arrivals, long seed) {
        return new OpenQueue(settings, load, seed).measure(arrivals);
    }

    private Measured measure(long arrivals) {
        double rho = Math.min(load / workers, LOAD_OF_LONGEST_WARM_UP);
        double warmUpNanos = 20 / ((1 - rho) * (1 - rho)) * MEAN_SERVICE_NANOS;
        while (atNanos < warmUpNanos) {
            arriveNext();
        }
        Figures before = behaviour.figures((long) atNanos, this);
        foundAllBusy = 0;
        for (long i = 0; i < arrivals; i++) {
            arriveNext();
        }
        Figures after = behaviour.figures((long) atNanos, this);
        assertThat(after.waitNanos() + after.serviceNanos()).isEqualTo(after.heldIntegralNanos());
        long rejected = after.turnedAway() - before.turnedAway();
        long accepted = arrivals - rejected;
        return new Measured(
                (double) (after.waitNanos() - before.waitNanos()) / accepted / MEAN_SERVICE_NANOS,
                (double) foundAllBusy / arrivals,
                (double) rejected / arrivals,
                after.utilisationSince(before));
    }

    private void arriveNext() {
        atNanos += chance.exponential(Stream.ARRIVALS, request, 0) / load * MEAN_SERVICE_NANOS;
        long now = (long) atNanos;
        behaviour.poll(now, this);
        foundAllBusy += held >= workers ? 1 : 0;
        held++;
        behaviour.arrive(request, request, 0, 0, now, this);
        request++;
    }

    @Override
    public void reply(long token, long number, int attempt, Reply reply, int status, int bodyBytes, long at) {
        held--;
    }

    @Override
    public void probeReply(long token, long probe, Reply reply, int status, long at) {
        throw new AssertionError("nobody probes here");
    }

    @Override
    public void readingReply(long token, long reading, Reply reply, int status, Map<String, Double> gauges, long at) {
        throw new AssertionError("nobody reads here");
    }

    @Override
    public void listening(boolean open, long at) {
        throw new AssertionError("nothing fails here");
    }

    @Override
    public void connectionsReset(long at) {
        throw new AssertionError("nothing fails here");
    }
}
