/**
 * The decisions of one balancer instance.
 *
 * <p>{@code Decider} composes pickers, standings and retry budgets for all pools of an instance; whoever drives it passes
 * the time in, carries out its {@code Orders} and hears its {@code DecisionSink}. Inside, {@code Roster} knows who
 * there is, {@code PoolDesk} picks for one pool, {@code Attempts}, {@code Probing} and {@code Readings} take what
 * happens. Allowed dependencies: the JDK, balancer.settings, core.pick, core.standing, core.weigh. Thread rule: not
 * thread-safe; a driver with several threads holds one lock over every call. First class to read: {@link
 * steelyard.balancer.core.decide.Decider}.
 */
@NullMarked
package steelyard.balancer.core.decide;

import org.jspecify.annotations.NullMarked;
