package steelyard.harness.conduct;

import java.util.ArrayList;
import java.util.List;
import steelyard.backends.behave.Change;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.drills.model.Cue;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.Hands;

/** Writes down what it is asked to do. */
final class TraceHands implements Hands {
    final List<String> trace = new ArrayList<>();
    final List<Long> dues = new ArrayList<>();

    @Override
    public void send(long request, long dueNanos, int traffic, int kind, int client) {
        trace.add("send " + request + " at " + dueNanos / 1_000_000 + " ms");
        dues.add(dueNanos);
    }

    @Override
    public void change(int backend, Change change) {
        trace.add("change " + backend + " " + change);
    }

    @Override
    public void drain(int backend, long limitNanos) {
        trace.add("drain " + backend + " within " + limitNanos / 1_000_000 + " ms");
    }

    @Override
    public void admit(int backend) {
        trace.add("admit " + backend);
    }

    @Override
    public void withdraw(int backend) {
        trace.add("withdraw " + backend);
    }

    @Override
    public void reweigh(int backend, int weight) {
        trace.add("reweigh " + backend + " to " + weight);
    }

    @Override
    public void reweighHost(int host, int weight) {
        trace.add("reweigh host " + host + " to " + weight);
    }

    @Override
    public void retune(int pool, ProbeSettings probe) {
        trace.add("retune " + pool + " to " + probe);
    }

    @Override
    public void retune(int pool, DrainSettings drain) {
        trace.add("retune " + pool + " to " + drain);
    }

    @Override
    public void retune(int pool, PoolSettings.Method method) {
        trace.add("retune " + pool + " to " + method);
    }

    @Override
    public void apply(long dueNanos, Cue cue, PlayListener.By by, Runnable carryOut) {
        carryOut.run();
        trace.add("applied " + cue.text() + ", due " + dueNanos / 1_000_000 + " ms, " + by);
    }
}
