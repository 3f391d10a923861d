package steelyard.balancer.live;

import java.io.IOException;
import java.net.InetSocketAddress;
import java.util.ArrayList;
import java.util.List;
import java.util.function.Function;
import org.jspecify.annotations.Nullable;

/** A backend that keeps every request as it came and answers each by a rule. */
final class KeepingBackend implements AutoCloseable {
    private final FakeBackend backend;
    private final Function<Message, @Nullable String> rule;
    private final List<Message> requests = new ArrayList<>();
    private @Nullable IOException failure;

    /** @param rule gives the octets of the answer, null for none; after none, and after one that says close, the connection is closed */
    KeepingBackend(Function<Message, @Nullable String> rule) throws IOException {
        this.rule = rule;
        this.backend = FakeBackend.playing(this::serve);
    }

    private void serve(Wire wire) throws IOException {
        try {
            for (Message request = Message.request(wire); request != null; request = Message.request(wire)) {
                keep(request);
                String answer = rule.apply(request);
                if (answer == null) {
                    return;
                }
                wire.send(answer);
                if (answer.contains("Connection: close")) {
                    return;
                }
            }
        } catch (IOException e) {
            keep(e);
        }
    }

    private synchronized void keep(Message request) {
        requests.add(request);
    }

    private synchronized void keep(IOException e) {
        failure = e;
    }

    /** What came so far. */
    synchronized List<Message> requests() {
        return List.copyOf(requests);
    }

    /** What made a connection end otherwise than between two requests. */
    synchronized @Nullable IOException failure() {
        return failure;
    }

    InetSocketAddress address() {
        return backend.address();
    }

    int connections() {
        return backend.connections();
    }

    @Override
    public void close() throws IOException {
        backend.close();
    }
}
