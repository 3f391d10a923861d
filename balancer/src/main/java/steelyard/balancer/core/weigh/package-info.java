/**
 * What weighs how much: set weights, host weights, ramps and headroom turned into effective weights and entitled shares.
 *
 * <p>{@code LoadReader} says when a backend's load page is read and how long a reading counts; {@code Headroom} is the
 * formula.
 *
 * <p>Allowed dependencies: the JDK, balancer.settings, core.pick's units, core.standing. Thread rule: owned by the Decider.
 * First class to read: {@link steelyard.balancer.core.weigh.PoolWeights}.
 */
@NullMarked
package steelyard.balancer.core.weigh;

import org.jspecify.annotations.NullMarked;
