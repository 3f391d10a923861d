/**
 * Probes on the wire.
 *
 * <p>Purpose: carries out the probes that the core orders and reports their answers; when one starts, when it is too
 * late and what its answer means are the core's. Allowed dependencies: Netty, {@code live.guard}, {@code live.tcp}, the
 * settings. Thread rule: everything runs on the home loop. First class to read:
 * {@link steelyard.balancer.live.probe.Probes}.
 */
@NullMarked
package steelyard.balancer.live.probe;

import org.jspecify.annotations.NullMarked;
