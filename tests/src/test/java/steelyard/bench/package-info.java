/**
 * Benchmarks, run by {@code tests/bench/run}; of the tests only a short soak is a part, which looks at no times.
 *
 * <p>Purpose: figures that can be compared within one run on one machine, and say nothing beyond it. Allowed
 * dependencies: all modules. Thread rule: each says its own. First class to read: the one named after the benchmark.
 */
@NullMarked
package steelyard.bench;

import org.jspecify.annotations.NullMarked;
