/**
 * Probes and readings of load pages on the wire.
 *
 * <p>Purpose: carries out the probes and readings that the core orders and reports what comes; when one starts, when it is
 * too late and what its answer means are the core's. Allowed dependencies: Netty, {@code live.guard}, {@code live.tcp},
 * {@code live.tls}, the settings. Thread rule: everything runs on the home loop. First class to read:
 * {@link steelyard.balancer.live.probe.Probes}.
 */
@NullMarked
package steelyard.balancer.live.probe;

import org.jspecify.annotations.NullMarked;
