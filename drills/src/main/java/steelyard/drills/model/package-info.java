@NullMarked
package steelyard.drills.model;

import org.jspecify.annotations.NullMarked;
