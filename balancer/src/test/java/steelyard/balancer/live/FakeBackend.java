package steelyard.balancer.live;

import java.io.IOException;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.net.ServerSocket;
import java.net.Socket;
import java.util.List;
import java.util.Objects;
import java.util.concurrent.CopyOnWriteArrayList;
import java.util.concurrent.atomic.AtomicInteger;
import org.jspecify.annotations.Nullable;

/** A backend of plain sockets that does exactly what its script says, one thread a connection. */
final class FakeBackend implements AutoCloseable {
    /** What happens on one connection; it is closed afterwards. */
    interface Script {
        void play(Wire wire) throws IOException;
    }

    private final ServerSocket server;
    private final List<Wire> wires = new CopyOnWriteArrayList<>();
    private final AtomicInteger connections = new AtomicInteger();
    private volatile Script script;

    private FakeBackend(Script script, ServerSocket server) throws IOException {
        this.script = script;
        this.server = server;
        server.setReuseAddress(true);
        server.bind(new InetSocketAddress(InetAddress.getLoopbackAddress(), 0), 128);
        daemon(this::accept);
    }

    static FakeBackend playing(Script script) throws IOException {
        return new FakeBackend(script, new ServerSocket());
    }

    /** Plays over the sockets that this unbound one accepts. */
    static FakeBackend playing(Script script, ServerSocket server) throws IOException {
        return new FakeBackend(script, server);
    }

    /** Answers every request, without content, with these octets. */
    static FakeBackend answering(String answer) throws IOException {
        return playing(wire -> {
            while (wire.readHead() != null) {
                wire.send(answer);
            }
        });
    }

    /** A loopback address where nobody listens. */
    static InetSocketAddress deadAddress() throws IOException {
        try (ServerSocket gone = new ServerSocket(0, 1, InetAddress.getLoopbackAddress())) {
            return new InetSocketAddress(gone.getInetAddress(), gone.getLocalPort());
        }
    }

    void play(Script next) {
        script = next;
    }

    InetSocketAddress address() {
        return (InetSocketAddress) server.getLocalSocketAddress();
    }

    /** How many connections were accepted so far. */
    int connections() {
        return connections.get();
    }

    /** What ended a script early, if anything did. */
    @Nullable
    IOException failure() {
        return wires.stream()
                .map(Wire::failure)
                .filter(Objects::nonNull)
                .findFirst()
                .orElse(null);
    }

    private void accept() {
        while (!server.isClosed()) {
            try {
                Socket socket = server.accept();
                connections.incrementAndGet();
                Wire wire = new Wire(socket);
                wires.add(wire);
                daemon(() -> serve(wire));
            } catch (IOException e) {
                return; // closed
            }
        }
    }

    private void serve(Wire wire) {
        try (wire) {
            script.play(wire);
        } catch (IOException e) {
            wire.failure(e); // the other end went; tests look at what the balancer made of it
        }
    }

    private static void daemon(Runnable work) {
        Thread thread = new Thread(work, "fake-backend");
        thread.setDaemon(true);
        thread.start();
    }

    @Override
    public void close() throws IOException {
        server.close();
        for (Wire wire : wires) {
            wire.close();
        }
    }
}
