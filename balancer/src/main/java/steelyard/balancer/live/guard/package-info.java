/**
 * The one lock around the decision core, its clock and its timer.
 *
 * <p>Purpose: lets many event loops and hand commands share one Decider. Allowed dependencies: the decision core, the
 * settings, Netty's executors. Thread rule: everything here may be called from any thread. First class to read:
 * {@link steelyard.balancer.live.guard.GuardedDecider}.
 */
@NullMarked
package steelyard.balancer.live.guard;

import org.jspecify.annotations.NullMarked;
