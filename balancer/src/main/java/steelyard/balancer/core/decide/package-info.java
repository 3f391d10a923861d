@NullMarked
package steelyard.balancer.core.decide;

import org.jspecify.annotations.NullMarked;
