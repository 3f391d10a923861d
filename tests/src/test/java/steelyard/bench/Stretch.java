package steelyard.bench;

import org.HdrHistogram.Histogram;

/**
 * What was measured over one or several stretches of time.
 *
 * @param nanos how long
 * @param latencies of every answer, in nanoseconds
 * @param cpuNanos CPU time of the whole process, clients and backend included
 * @param middleNanos the part of it spent by the threads of what stands in the middle
 */
record Stretch(long nanos, Histogram latencies, long cpuNanos, long middleNanos) {
    Stretch with(Stretch other) {
        Histogram both = latencies.copy();
        both.add(other.latencies);
        return new Stretch(nanos + other.nanos, both, cpuNanos + other.cpuNanos, middleNanos + other.middleNanos);
    }

    double perSecond() {
        return latencies.getTotalCount() * 1e9 / nanos;
    }

    double p99Millis() {
        return latencies.getValueAtPercentile(99) / 1e6;
    }

    /** A request. */
    double cpuMicros() {
        return cpuNanos / 1e3 / latencies.getTotalCount();
    }

    /** A request. */
    double middleMicros() {
        return middleNanos / 1e3 / latencies.getTotalCount();
    }
}
