package steelyard.backends.fleet;

import java.io.IOException;
import java.net.InetSocketAddress;
import java.net.ServerSocket;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.concurrent.atomic.AtomicInteger;

/**
 * Hands out loopback ports below the system's ephemeral range, each at most once in the life of this process. No outgoing
 * connection gets its own port there, so a connection to a backend that is down cannot meet itself, and a
 * backend that comes back finds its port free. Any thread.
 */
public final class Ports {

    private static final Path RANGE = Path.of("/proc/sys/net/ipv4/ip_local_port_range");
    private static final int LOWEST = 10_000;
    private static final int USUAL_FIRST = 20_000;
    private static final int USUAL_END = 32_000;

    private static final Ports OF_THIS_PROCESS =
            of(RANGE, (int) ProcessHandle.current().pid());

    private final int first;
    private final int end;
    private final int start;
    private final AtomicInteger taken = new AtomicInteger();

    /** Ports from {@code first} to below {@code end}, each once, from {@code start} and round. */
    Ports(int first, int end, int start) {
        this.first = first;
        this.end = end;
        this.start = start;
    }

    /** Those that everything in this process shares. */
    public static Ports ofThisProcess() {
        return OF_THIS_PROCESS;
    }

    /**
     * The ports below the range in a file of the form {@code 32768 60999}, or the usual ones where there is no such file
     * or hardly any room below it.
     *
     * @param salt spreads processes that start side by side, so that they seldom try the same port
     */
    static Ports of(Path rangeFile, int salt) {
        int end = Math.min(USUAL_END, ephemeralStart(rangeFile));
        int first = end > USUAL_FIRST + 1_000 ? USUAL_FIRST : LOWEST;
        if (end - first < 1_000) {
            first = USUAL_FIRST;
            end = USUAL_END;
        }
        return new Ports(first, end, Math.floorMod(salt * 97, end - first));
    }

    /**
     * A port that nobody listens on or keeps for later.
     *
     * @throws CannotStart if none is left
     */
    public int next() throws CannotStart {
        for (int turn = taken.getAndIncrement(); turn < end - first; turn = taken.getAndIncrement()) {
            int port = first + (start + turn) % (end - first);
            if (isFree(port)) {
                return port;
            }
        }
        throw new CannotStart("no free port from " + first + " to " + (end - 1)
                + " on 127.0.0.1; stop what listens there, or move net.ipv4.ip_local_port_range");
    }

    private static boolean isFree(int port) {
        try (ServerSocket socket = new ServerSocket()) {
            socket.setReuseAddress(false); // else a port that is kept for a dead backend would look free
            socket.bind(new InetSocketAddress("127.0.0.1", port));
            return true;
        } catch (IOException busy) {
            return false;
        }
    }

    private static int ephemeralStart(Path rangeFile) {
        try {
            return Integer.parseInt(Files.readString(rangeFile).strip().split("\\s+", 2)[0]);
        } catch (IOException | NumberFormatException unknown) {
            return USUAL_END;
        }
    }
}
