package steelyard.backends.stub;

import java.util.List;
import java.util.concurrent.CopyOnWriteArrayList;

/** Writes down what a stub tells its listener, without instants. */
final class Heard implements BackendListener {

    final List<String> lines = new CopyOnWriteArrayList<>();

    @Override
    public void received(int backend, long request, int attempt, long atNanos) {
        lines.add("received #" + request + "." + attempt);
    }

    @Override
    public void ended(int backend, long request, int attempt, boolean answeredInFull, int status, long atNanos) {
        lines.add((answeredInFull ? "answered #" : "broken #") + request + "." + attempt + " " + status);
    }
}
