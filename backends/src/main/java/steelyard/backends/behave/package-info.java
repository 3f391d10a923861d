@NullMarked
package steelyard.backends.behave;

import org.jspecify.annotations.NullMarked;
