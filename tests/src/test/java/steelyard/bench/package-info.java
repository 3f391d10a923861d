/**
 * Benchmarks, run by {@code tests/bench/run}; none of them is part of the tests.
 *
 * <p>Purpose: figures that can be compared within one run on one machine, and say nothing beyond it. Allowed
 * dependencies: all modules. Thread rule: each says its own. First class to read: the one named after the benchmark.
 */
@NullMarked
package steelyard.bench;

import org.jspecify.annotations.NullMarked;
