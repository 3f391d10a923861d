/**
 * What weighs how much: set weights, host weights and ramps turned into effective weights and entitled shares.
 *
 * <p>Allowed dependencies: the JDK, balancer.settings, core.standing. Thread rule: owned by the Decider. First class to
 * read: {@link steelyard.balancer.core.weigh.PoolWeights}.
 */
@NullMarked
package steelyard.balancer.core.weigh;

import org.jspecify.annotations.NullMarked;
