/**
 * The behaviour of a backend, driven directly, against the theory of queues. Each table of expected values lies beside
 * the tests as a resource that names its source.
 */
@NullMarked
package steelyard.outside.behave;

import org.jspecify.annotations.NullMarked;
