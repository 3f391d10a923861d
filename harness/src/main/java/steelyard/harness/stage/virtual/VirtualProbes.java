package steelyard.harness.stage.virtual;

import steelyard.backends.behave.Reply;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.harness.stage.virtual.Post.Kind;

/** Probes between the balancer and backends: each on a connection of its own. */
final class VirtualProbes {
    private final Post post;
    private final boolean[] asks;
    private final boolean[] speaksTls;

    VirtualProbes(BalancerSettings settings, Post post) {
        this.post = post;
        asks = new boolean[settings.backends().size()];
        speaksTls = new boolean[asks.length];
        int backend = 0;
        for (PoolSettings pool : settings.pools()) {
            for (int member = 0; member < pool.backends().size(); member++) {
                speaksTls[backend] = pool.front().backendTls();
                asks[backend++] = pool.probe() != null && pool.probe().path() != null;
            }
        }
    }

    void start(int backend, long probe, long nowNanos) {
        post.send(Kind.PROBE_CONNECT, nowNanos, probe, backend);
    }

    /** A probe that only connects is answered by the connection. */
    void connect(VirtualBackends backends, int backend, long probe, long nowNanos) {
        if (!backends.listening(backend)) {
            result(backend, probe, false, nowNanos);
        } else if (asks[backend]) {
            post.send(speaksTls[backend] ? Kind.PROBE_ON_TLS : Kind.PROBE, nowNanos, probe, backend);
        } else {
            result(backend, probe, true, nowNanos);
        }
    }

    void read(VirtualBackends backends, int backend, long probe, long nowNanos) {
        if (backends.killed(backend)) {
            result(backend, probe, false, nowNanos);
        } else {
            backends.probe(backend, probe, nowNanos);
        }
    }

    void replied(int backend, long probe, Reply reply, int status, long nowNanos) {
        switch (reply) {
            case ANSWER, TURNED_AWAY, FAULT -> result(backend, probe, status >= 200 && status <= 299, nowNanos);
            case LOST -> result(backend, probe, false, nowNanos);
            case SILENCE, DROPPED -> {
                // The core drops it when its time is over.
            }
        }
    }

    private void result(int backend, long probe, boolean good, long nowNanos) {
        post.send(Kind.PROBE_RESULT, nowNanos, probe, 2L * backend + (good ? 1 : 0));
    }
}
