/**
 * The virtual stage: the same decider and the same behaviours, driven by an event queue instead of sockets.
 *
 * <p>Purpose: a play in virtual time, fast and exact. What decides and what behaves is not here; this package only carries
 * messages between clients, the balancer and backends after the delays of {@link
 * steelyard.harness.stage.virtual.Transport}, and keeps connections as the live side does. Allowed dependencies: drills.model, the
 * pure parts of balancer and backends, harness.record, harness.stage; no threads, no clock. Thread rule: one thread a
 * play; different plays share nothing. First class to read: {@link steelyard.harness.stage.virtual.VirtualStage}.
 */
@NullMarked
package steelyard.harness.stage.virtual;

import org.jspecify.annotations.NullMarked;
