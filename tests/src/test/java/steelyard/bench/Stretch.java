package steelyard.bench;

/**
 * What was measured over a stretch of time.
 *
 * @param cpuMicros CPU time of the whole process a request, clients and backend included
 * @param middleMicros the part of it spent by the threads of what stands in the middle
 */
record Stretch(double perSecond, double p99Millis, double cpuMicros, double middleMicros) {}
