/**
 * The state machines behind a standing: probes, drain, warm-up.
 */
@NullMarked
package steelyard.balancer.core.standing;

import org.jspecify.annotations.NullMarked;
