/**
 * The virtual stage: the same decider and the same behaviours, driven by an event queue instead of sockets.
 *
 * <p>Purpose: a play in virtual time, fast and exact. What decides and what behaves is not here; this package only carries
 * messages between clients, the balancer and backends after the delays of {@link
 * steelyard.harness.stage.virtual.Transport}, and keeps connections as the live side does. A new connection costs a way there
 * and back before its first request, TLS one more; a connection that is passed through is picked for as soon as it stands.
 * What cannot come about here is left out: messages of clients are whole, well-formed and small, so no limit on heads,
 * targets or content is met, nor the time limits for them; connections stand at once or are refused; the limit on idleness
 * inside an exchange is not kept. Allowed dependencies: drills.model, the
 * pure parts of balancer and backends, harness.record, harness.stage; no threads, no clock. Thread rule: one thread a
 * play; different plays share nothing. First class to read: {@link steelyard.harness.stage.virtual.VirtualStage}.
 */
@NullMarked
package steelyard.harness.stage.virtual;

import org.jspecify.annotations.NullMarked;
