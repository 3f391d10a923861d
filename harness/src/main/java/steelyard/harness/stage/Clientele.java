package steelyard.harness.stage;

import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Traffic;

/**
 * Who the clients of a drill are, in words that are the same on every stage: each has a number, counted over all streams,
 * and an address of its own on the loopback network.
 */
public final class Clientele {
    /** The most that have addresses of their own: those from 127.64.0.0 up. */
    public static final int MOST = 192 << 16;

    private static final int FIRST_OCTET = 64;

    private final List<Traffic> traffic;
    private final int[] firsts;
    private final int count;

    public Clientele(List<Traffic> traffic) {
        this.traffic = List.copyOf(traffic);
        firsts = new int[traffic.size()];
        int clients = 0;
        for (int stream = 0; stream < firsts.length; stream++) {
            firsts[stream] = clients;
            clients = Math.addExact(clients, traffic.get(stream).clients());
        }
        count = clients;
    }

    /** All clients of all streams. */
    public int count() {
        return count;
    }

    /** The number, over all streams, of a client of one stream. */
    public int number(int stream, int clientOfStream) {
        return firsts[stream] + clientOfStream;
    }

    /** The address of a client by its number over all streams; beyond {@link #MOST} they begin again. */
    public static String address(int number) {
        int k = number % MOST;
        return "127." + (FIRST_OCTET + (k >> 16)) + "." + (k >> 8 & 255) + "." + (k & 255);
    }

    /** The target of a client's request, with its number where the drill asks for it. */
    public String path(int stream, int kind, int clientOfStream) {
        return filled(request(stream, kind).path(), stream, clientOfStream);
    }

    /** The value of a header of a client's request; null where it has none of that name, in whatever case. */
    public @Nullable String header(int stream, int kind, int clientOfStream, String name) {
        for (Map.Entry<String, String> header : request(stream, kind).headers().entrySet()) {
            if (header.getKey().equalsIgnoreCase(name)) {
                return filled(header.getValue(), stream, clientOfStream);
            }
        }
        return null;
    }

    /** A text of a request, with the client's number where the drill asks for it. */
    public String filled(String text, int stream, int clientOfStream) {
        return text.contains(Traffic.Request.CLIENT)
                ? text.replace(Traffic.Request.CLIENT, Integer.toString(number(stream, clientOfStream)))
                : text;
    }

    private Traffic.Request request(int stream, int kind) {
        return traffic.get(stream).requests().get(kind);
    }
}
