/**
 * Event loops, channels and time limits on them; connections that are passed through as they are.
 *
 * <p>Purpose: the ground that HTTP forwarding, probes and the control page stand on, and the fronts of pools whose unit
 * of work is a connection. Allowed dependencies: Netty, {@code live.guard}, {@code live.tls}, the decision core, the
 * settings. Thread rule: {@link steelyard.balancer.live.tcp.Transport} and {@link
 * steelyard.balancer.live.tcp.TcpFronts} may be used from any thread, everything else from its loop alone. First class
 * to read: {@link steelyard.balancer.live.tcp.Transport}, then {@link steelyard.balancer.live.tcp.Relay}.
 */
@NullMarked
package steelyard.balancer.live.tcp;

import org.jspecify.annotations.NullMarked;
