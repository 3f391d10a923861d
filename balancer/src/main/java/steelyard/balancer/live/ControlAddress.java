package steelyard.balancer.live;

import java.net.InetSocketAddress;

/**
 * Where the control page is and what opens it.
 *
 * @param token to be sent as {@code Authorization: Bearer <token>}; made for this run: to be shown to whoever plays, to
 *     be written to no file
 */
public record ControlAddress(InetSocketAddress address, String token) {
    /** What the paths {@code /metrics}, {@code /state} and {@code /cues} are put behind. */
    public String base() {
        return "http://" + address.getAddress().getHostAddress() + ":" + address.getPort();
    }
}
