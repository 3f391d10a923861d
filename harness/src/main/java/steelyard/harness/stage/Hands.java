package steelyard.harness.stage;

import steelyard.backends.behave.Change;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.drills.model.Cue;
import steelyard.harness.record.PlayListener;

/** What an agenda can have done on a stage. Called by the thread that polls the agenda. */
public interface Hands {

    /**
     * Sends a request now.
     *
     * @param request its number, from 0 by due time
     * @param dueNanos when it was due; latency counts from there
     * @param traffic number of the traffic stream
     * @param kind place in that stream's mix
     * @param client number of the client within the stream
     */
    void send(long request, long dueNanos, int traffic, int kind, int client);

    /** Changes how a backend behaves. */
    void change(int backend, Change change);

    /** Begins a drain; {@code limitNanos} 0 takes the pool's limit. */
    void drain(int backend, long limitNanos);

    void admit(int backend);

    void withdraw(int backend);

    void reweigh(int backend, int weight);

    void reweighHost(int host, int weight);

    /** Changes how the backends of a pool are probed; those under way go on. */
    void retune(int pool, ProbeSettings probe);

    /** Changes what drains of a pool keep to, from the next one on. */
    void retune(int pool, DrainSettings drain);

    /** Changes how a pool picks. */
    void retune(int pool, PoolSettings.Method method);

    /**
     * Carries a cue out and tells the listener of it, before anything that it brings about.
     *
     * @param carryOut what the cue does with these hands; run once, at once
     */
    void apply(long dueNanos, Cue cue, PlayListener.By by, Runnable carryOut);
}
