/**
 * Settings of a balancer instance, validated once and then believed.
 *
 * <p>Purpose: what the decision core and the live side are told at the start. Allowed dependencies: the JDK. Thread
 * rule: immutable. First class to read: {@link steelyard.balancer.settings.BalancerSettings}.
 */
@NullMarked
package steelyard.balancer.settings;

import org.jspecify.annotations.NullMarked;
