package steelyard.outside.core;

import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.core.decide.Chance;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.core.decide.Orders;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.PoolSettings.Method;
import steelyard.balancer.settings.ProbeSettings;

/** A Decider on a bench: one pool, its orders queued, its changes of standing kept. */
final class CoreBench implements DecisionSink, Orders {
    static final long SECOND = 1_000_000_000L;

    final Deque<Long> probesToAnswer = new ArrayDeque<>();
    final List<Transition> transitions = new ArrayList<>();
    private final Ask ask = new Ask();
    final Decider decider;

    CoreBench(Method method, int[] weights, @Nullable ProbeSettings probe, Chance chance, long nowNanos) {
        List<BackendSettings> backends = IntStream.range(0, weights.length)
                .mapToObj(i -> new BackendSettings("backend-" + i, weights[i], 0, false))
                .toList();
        PoolSettings pool = PoolSettings.named("seats", PickSettings.of(method))
                .probe(probe)
                .of(backends);
        BalancerSettings settings =
                new BalancerSettings("bench", 1, List.of(new HostSettings("quay", 1)), List.of(pool));
        decider = new Decider(settings, chance, this, this, nowNanos);
    }

    /** Who is served in so many picks, as letters in list order. */
    String order(int picks) {
        StringBuilder order = new StringBuilder();
        for (int request = 0; request < picks; request++) {
            ask.request = request;
            int backend = decider.pick(ask, request);
            order.append((char) ('A' + backend));
            decider.ended(backend, request, 1, Outcome.ANSWERED, 200, request);
        }
        return order.toString();
    }

    @Override
    public void startProbe(int backend, long probe) {
        probesToAnswer.add(probe);
    }

    @Override
    public void dropProbe(int backend, long probe) {
        probesToAnswer.remove(probe);
    }

    @Override
    public void startReading(int backend, long number) {}

    @Override
    public void dropReading(int backend, long number) {}

    @Override
    public void place(long ticket, int backend) {}

    @Override
    public void cut(int backend) {}

    @Override
    public void stood(Transition transition) {
        transitions.add(transition);
    }
}
