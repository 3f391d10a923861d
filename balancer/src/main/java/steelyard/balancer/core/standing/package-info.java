/**
 * What the balancer thinks of a backend: small state machines over independent facts.
 *
 * <p>{@code ProbeTracker} turns answers and silences into up or down; {@code Hand} is what people ordered; {@code WarmUp}
 * is the ramp after a return; {@code Bench} is what failures of live attempts say. {@code BackendStanding} holds the four of
 * one backend and says the word that shows: the first that holds of withdrawn, draining, down, benched, warming, up.
 * {@code Eligibility} makes of a pool's standings who may be picked: tiers and the last resort.
 *
 * <p>Allowed dependencies: the JDK, balancer.settings. Thread rule: none is thread-safe; the Decider owns them. Time is
 * an argument; instants are compared by subtraction, so any origin will do. First class to read: {@link
 * steelyard.balancer.core.standing.BackendStanding}.
 */
@NullMarked
package steelyard.balancer.core.standing;

import org.jspecify.annotations.NullMarked;
