package steelyard.harness.judge;

import java.util.Set;
import java.util.stream.IntStream;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Pool.Weights;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Sample;

/**
 * {@code settled-in}: from the cue to the first instant after which, up to the next cue in the pool, every second keeps
 * every backend's share near its due, see {@link Settling}. The last of the pools that the target has backends in.
 */
final class SettledIn extends SinceCue {
    private final Settling[] pools;
    private final Truth truth;

    /** @param members of the target; one of each pool stands for its pool */
    SettledIn(String after, int[] members, Cast cast) {
        super(after, onePerPool(members, cast), cast);
        truth = new Truth(cast);
        pools = new Settling[members()];
        for (int member = 0; member < members(); member++) {
            pools[member] = new Settling(cast, cast.poolOf(backend(member)), truth);
        }
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.CUES, Hears.PICKS, Hears.STANDINGS, Hears.WEIGHTS, Hears.SAMPLES);
    }

    @Override
    void begin() {
        for (Settling each : pools) {
            each.begin(beginNanos());
        }
    }

    @Override
    void applied(long atNanos, Cue cue, By by) {
        advance(atNanos);
        truth.applied(cue, by);
    }

    @Override
    boolean endsMember(int member, Cue cue, int[] targets) {
        int pool = cast().poolOf(backend(member));
        return IntStream.of(targets).anyMatch(each -> cast().poolOf(each) == pool);
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        for (int member = 0; member < members(); member++) {
            if (cast().poolOf(backend(member)) == pool && running(backend(member)) >= 0) {
                pools[member].picked(atNanos, backend);
            }
        }
    }

    @Override
    public void stood(Transition transition) {
        advance(transition.atNanos());
        truth.stood(transition);
    }

    @Override
    public void reweighed(long atNanos, boolean host, int number, int weight) {
        if (!host) {
            advance(atNanos);
            truth.reweighed(number, weight);
        }
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        advance(atNanos);
    }

    @Override
    void close(int member, long atNanos) {
        pools[member].upTo(atNanos);
    }

    @Override
    Reading member(int member) {
        int pool = cast().poolOf(backend(member));
        if (cast().pools().get(pool).weights() == Weights.HOST) {
            return Reading.notMeasured("under host weights a pool alone has no due shares; use share");
        }
        if (cast().weighsByLoad(pool)) {
            return Reading.notMeasured("weights by load move what is due; use share or swing");
        }
        return pools[member].read(cast().pools().get(pool).name());
    }

    private void advance(long atNanos) {
        for (int member = 0; member < members(); member++) {
            if (running(backend(member)) >= 0) {
                pools[member].upTo(atNanos);
            }
        }
    }

    private static int[] onePerPool(int[] members, Cast cast) {
        return IntStream.range(0, members.length)
                .filter(i -> IntStream.range(0, i).noneMatch(j -> cast.poolOf(members[j]) == cast.poolOf(members[i])))
                .map(i -> members[i])
                .toArray();
    }
}
