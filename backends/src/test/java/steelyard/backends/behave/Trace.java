package steelyard.backends.behave;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;

/** Writes down what a behaviour plans, one line a plan, instants counted from an origin in milliseconds. */
final class Trace implements ReplySink {

    static final long MILLI = 1_000_000;

    final List<String> lines = new ArrayList<>();
    private final long originNanos;

    Trace(long originNanos) {
        this.originNanos = originNanos;
    }

    @Override
    public void reply(long token, long request, int attempt, Reply reply, int status, int bodyBytes, long atNanos) {
        lines.add(at(atNanos) + " #" + request + "." + attempt + " " + reply + " " + status);
    }

    @Override
    public void probeReply(long token, long probe, Reply reply, int status, long atNanos) {
        lines.add(at(atNanos) + " probe " + probe + " " + reply + " " + status);
    }

    @Override
    public void readingReply(
            long token, long reading, Reply reply, int status, Map<String, Double> gauges, long atNanos) {
        lines.add(at(atNanos) + " reading " + reading + " " + reply + " " + status + " " + gauges);
    }

    @Override
    public void listening(boolean open, long atNanos) {
        lines.add(at(atNanos) + (open ? " open" : " shut"));
    }

    @Override
    public void connectionsReset(long atNanos) {
        lines.add(at(atNanos) + " reset");
    }

    private String at(long nanos) {
        long since = nanos - originNanos;
        return since % MILLI == 0 ? Long.toString(since / MILLI) : since + "ns";
    }
}
