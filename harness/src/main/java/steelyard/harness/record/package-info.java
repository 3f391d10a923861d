@NullMarked
package steelyard.harness.record;

import org.jspecify.annotations.NullMarked;
