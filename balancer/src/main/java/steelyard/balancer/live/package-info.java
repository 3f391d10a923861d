/**
 * The live side of the balancer: sockets on one side, the decision core on the other.
 *
 * <p>Purpose: starts and stops a balancer and takes hand commands. It translates and decides nothing. Allowed
 * dependencies: its own sub-packages, the decision core, the settings, Netty. Thread rule: a
 * {@link steelyard.balancer.live.Balancer} may be used from any thread but its own event loops. First class to read:
 * {@link steelyard.balancer.live.Balancer}.
 */
@NullMarked
package steelyard.balancer.live;

import org.jspecify.annotations.NullMarked;
