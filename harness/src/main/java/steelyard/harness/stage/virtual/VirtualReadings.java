package steelyard.harness.stage.virtual;

import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Reply;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.harness.stage.virtual.Post.Kind;

/** Readings of load pages between the balancer and backends: each on a connection of its own, as probes are. */
final class VirtualReadings {
    private final Post post;
    private final List<Boolean> speaksTls = new ArrayList<>();
    /** By backend: names of the gauges that count, in order; none where nothing is read. */
    private final List<List<String>> asked = new ArrayList<>();
    /**
     * By backend: what the page that is on its way shows. A page is taken in before the next one of its backend is
     * answered, or else is too old to count.
     */
    private final double[][] shown;

    VirtualReadings(BalancerSettings settings, Post post) {
        this.post = post;
        for (PoolSettings pool : settings.pools()) {
            speaksTls.addAll(
                    Collections.nCopies(pool.backends().size(), pool.front().backendTls()));
            asked.addAll(Collections.nCopies(pool.backends().size(), gauges(pool.load())));
        }
        shown = asked.stream().map(each -> new double[each.size()]).toArray(double[][]::new);
    }

    private static List<String> gauges(@Nullable LoadSettings load) {
        return load == null
                ? List.of()
                : load.gauges().stream().map(LoadSettings.Gauge::name).toList();
    }

    void start(int backend, long reading, long nowNanos) {
        post.send(Kind.READING_CONNECT, nowNanos, reading, backend);
    }

    void connect(VirtualBackends backends, int backend, long reading, long nowNanos) {
        if (backends.listening(backend)) {
            post.send(speaksTls.get(backend) ? Kind.READING_ON_TLS : Kind.READING, nowNanos, reading, backend);
        } else {
            send(backend, reading, false, nowNanos);
        }
    }

    void read(VirtualBackends backends, int backend, long reading, long nowNanos) {
        if (backends.killed(backend)) {
            send(backend, reading, false, nowNanos);
        } else {
            backends.read(backend, reading, nowNanos);
        }
    }

    /** The backend has answered, or never will. */
    void replied(int backend, long reading, Reply reply, Map<String, Double> gauges, long nowNanos) {
        switch (reply) {
            case ANSWER -> {
                note(backend, gauges);
                send(backend, reading, true, nowNanos);
            }
            case TURNED_AWAY, FAULT, LOST -> send(backend, reading, false, nowNanos);
            case SILENCE, DROPPED -> {
                // The core drops it when its time is over.
            }
        }
    }

    private void note(int backend, Map<String, Double> gauges) {
        List<String> names = asked.get(backend);
        for (int i = 0; i < names.size(); i++) {
            shown[backend][i] = gauges.getOrDefault(names.get(i), Double.NaN);
        }
    }

    private void send(int backend, long reading, boolean good, long nowNanos) {
        post.send(Kind.READING_RESULT, nowNanos, reading, 2L * backend + (good ? 1 : 0));
    }

    /** What was read reaches the balancer. */
    void result(Decider decider, int backend, long reading, boolean good, long nowNanos) {
        decider.read(backend, reading, good ? shown[backend] : null, nowNanos);
    }
}
