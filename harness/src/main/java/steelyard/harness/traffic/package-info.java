/**
 * When requests are due, of which kind they are and which client sends them.
 *
 * <p>Purpose: open-loop arrivals as a plan that is polled, the same for every stage and for every setting of the
 * balancer under one seed. Allowed dependencies: drills.model, the keyed draws of backends.behave. Thread rule: one
 * thread at a time. First class to read: {@link steelyard.harness.traffic.ArrivalPlan}.
 */
@NullMarked
package steelyard.harness.traffic;

import org.jspecify.annotations.NullMarked;
