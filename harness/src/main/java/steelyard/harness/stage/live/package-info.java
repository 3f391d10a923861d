/**
 * The live side of the stage: real sockets on the loopback interface, real time.
 *
 * <p>Purpose: an open-loop generator, the balancer and an embedded fleet, and one ordered account of what all three
 * saw. Allowed dependencies: everything of the harness but judge, report, console and cli; the balancer; the backends;
 * Netty. Thread rule: the generator lives on one event loop, the account is told from any thread and tells its listener
 * from one thread of its own. First class to read: {@link steelyard.harness.stage.live.LiveStage}.
 */
@NullMarked
package steelyard.harness.stage.live;

import org.jspecify.annotations.NullMarked;
