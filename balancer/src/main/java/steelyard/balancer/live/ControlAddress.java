package steelyard.balancer.live;

import java.net.InetSocketAddress;

/**
 * Where the control page is and what opens it.
 *
 * @param token to be sent as {@code Authorization: Bearer <token>}; made for this run, not to be written anywhere
 */
public record ControlAddress(InetSocketAddress address, String token) {}
