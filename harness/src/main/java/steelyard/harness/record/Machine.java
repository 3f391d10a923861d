package steelyard.harness.record;

import org.jspecify.annotations.Nullable;

/**
 * The machine that a play ran on, and the only wall time of a run.
 *
 * @param started wall-clock start, ISO 8601 in UTC
 * @param memoryBytes of the machine
 * @param transport {@code epoll}, {@code nio}, or {@code none} on the virtual stage
 * @param engine the container engine, or null
 */
public record Machine(
        String started,
        int processors,
        long memoryBytes,
        String system,
        String java,
        String transport,
        @Nullable String engine) {}
