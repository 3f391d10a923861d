/**
 * Event loops, channels and time limits on them.
 *
 * <p>Purpose: the ground that HTTP forwarding, probes and the control page stand on. Allowed dependencies: Netty.
 * Thread rule: {@link steelyard.balancer.live.tcp.Transport} may be used from any thread,
 * {@link steelyard.balancer.live.tcp.Deadline} from its loop alone. First class to read:
 * {@link steelyard.balancer.live.tcp.Transport}.
 */
@NullMarked
package steelyard.balancer.live.tcp;

import org.jspecify.annotations.NullMarked;
