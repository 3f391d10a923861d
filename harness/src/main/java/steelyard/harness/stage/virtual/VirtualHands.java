package steelyard.harness.stage.virtual;

import steelyard.backends.behave.Change;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.drills.model.Cue;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.Hands;

/** The agenda's hands, at the instant that the stage has come to. */
final class VirtualHands implements Hands {
    private final PlayListener listener;
    private final VirtualBackends backends;
    private final VirtualClients clients;
    private final Decider decider;
    private long nowNanos;

    VirtualHands(PlayListener listener, VirtualBackends backends, VirtualBalancer balancer) {
        this.listener = listener;
        this.backends = backends;
        clients = balancer.clients();
        decider = balancer.decider();
    }

    /** All that is done from here on is done at that instant. */
    VirtualHands at(long instantNanos) {
        nowNanos = instantNanos;
        return this;
    }

    @Override
    public void send(long request, long dueNanos, int traffic, int kind, int client) {
        clients.send(request, dueNanos, traffic, kind, client, nowNanos);
    }

    @Override
    public void change(int backend, Change change) {
        backends.apply(backend, change, nowNanos);
    }

    @Override
    public void drain(int backend, long limitNanos) {
        decider.drain(backend, limitNanos, nowNanos);
    }

    @Override
    public void admit(int backend) {
        decider.admit(backend, nowNanos);
    }

    @Override
    public void withdraw(int backend) {
        decider.withdraw(backend, nowNanos);
    }

    @Override
    public void reweigh(int backend, int weight) {
        decider.reweigh(backend, weight, nowNanos);
    }

    @Override
    public void reweighHost(int host, int weight) {
        decider.reweighHost(host, weight, nowNanos);
    }

    @Override
    public void retune(int pool, ProbeSettings probe) {
        decider.retune(pool, probe, nowNanos);
    }

    @Override
    public void retune(int pool, DrainSettings drain) {
        decider.retune(pool, drain, nowNanos);
    }

    @Override
    public void retune(int pool, PoolSettings.Method method) {
        decider.retune(pool, method, nowNanos);
    }

    @Override
    public void apply(long dueNanos, Cue cue, PlayListener.By by, Runnable carryOut) {
        listener.cueApplied(nowNanos, dueNanos, cue, by);
        carryOut.run();
    }
}
