package steelyard.balancer.core.decide;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import steelyard.balancer.core.standing.Transition;

/** Writes down, as short lines, what a Decider orders and tells; instants as distance from {@link #origin}. */
final class Trace implements DecisionSink, Orders {
    long origin;
    final long[] lastProbe = new long[16];
    private final List<String> lines = new ArrayList<>();

    List<String> lines() {
        return lines;
    }

    String last() {
        return lines.get(lines.size() - 1);
    }

    private void note(String format, Object... values) {
        lines.add(String.format(Locale.ROOT, format, values));
    }

    @Override
    public void picked(long now, int pool, int backend, long request, int attempt, int inFlight) {
        note("%d picked %d for %d/%d, %d in flight", now - origin, backend, request, attempt, inFlight);
    }

    @Override
    public void nobody(long now, int pool, long request, int attempt) {
        note("%d nobody in %d for %d/%d", now - origin, pool, request, attempt);
    }

    @Override
    public void ended(long now, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        note("%d ended %d for %d/%d %s, %d in flight", now - origin, backend, request, attempt, outcome, inFlight);
    }

    @Override
    public void retryAsked(long now, int pool, long request, int attempt, boolean granted) {
        note("%d retry in %d after %d/%d: %s", now - origin, pool, request, attempt, granted);
    }

    @Override
    public void probed(long now, int backend, long probe, boolean passed) {
        if (!passed) {
            note("%d probe %d of %d missed", now - origin, probe, backend);
        }
    }

    @Override
    public void stood(Transition change) {
        note(
                "%d %d %s -> %s by %s",
                change.atNanos() - origin, change.backend(), change.from(), change.to(), change.cause());
    }

    @Override
    public void reweighed(long now, boolean host, int number, int weight) {
        note("%d %s %d weighs %d", now - origin, host ? "host" : "backend", number, weight);
    }

    @Override
    public void waited(long now, int pool, long request, int attempt, int waiting) {
        note("%d waits in %d: %d/%d, %d of them", now - origin, pool, request, attempt, waiting);
    }

    @Override
    public void loadRead(long now, int backend, long number, int headroomMilli, boolean fresh) {
        note("%d reading %d of %d: %d%s", now - origin, number, backend, headroomMilli, fresh ? "" : ", stale");
    }

    @Override
    public void startProbe(int backend, long probe) {
        lastProbe[backend] = probe;
        note("start probe %d of %d", probe, backend);
    }

    @Override
    public void dropProbe(int backend, long probe) {
        note("drop probe %d of %d", probe, backend);
    }

    @Override
    public void startReading(int backend, long number) {
        note("start reading %d of %d", number, backend);
    }

    @Override
    public void dropReading(int backend, long number) {
        note("drop reading %d of %d", number, backend);
    }

    @Override
    public void place(long ticket, int backend) {
        note("ticket %d gets %d", ticket, backend);
    }

    @Override
    public void cut(int backend) {
        note("cut everything on %d", backend);
    }
}
