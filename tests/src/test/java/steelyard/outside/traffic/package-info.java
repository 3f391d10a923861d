/**
 * Arrival plans against the laws that they claim to follow.
 *
 * <p>Allowed dependencies: harness.traffic, backends.behave, commons-math3. First class to read: {@link
 * steelyard.outside.traffic.PoissonArrivalsTest}.
 */
@NullMarked
package steelyard.outside.traffic;

import org.jspecify.annotations.NullMarked;
