package steelyard.bench;

import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicLong;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.BenchmarkMode;
import org.openjdk.jmh.annotations.Fork;
import org.openjdk.jmh.annotations.Measurement;
import org.openjdk.jmh.annotations.Mode;
import org.openjdk.jmh.annotations.OutputTimeUnit;
import org.openjdk.jmh.annotations.Param;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;
import org.openjdk.jmh.annotations.Warmup;
import steelyard.balancer.core.pick.LeastConnections;
import steelyard.balancer.core.pick.Picker;
import steelyard.balancer.core.pick.Ramp;
import steelyard.balancer.core.pick.RoundRobin;
import steelyard.balancer.core.pick.Stride;
import steelyard.balancer.core.pick.WeightedRoundRobin;

/** The cost of one pick by method and number of backends, beside an atomic increment. Weights are 1 to 7 in turn. */
@BenchmarkMode(Mode.AverageTime)
@OutputTimeUnit(TimeUnit.NANOSECONDS)
@Warmup(iterations = 3, time = 500, timeUnit = TimeUnit.MILLISECONDS)
@Measurement(iterations = 4, time = 500, timeUnit = TimeUnit.MILLISECONDS)
@Fork(1)
public class PicksBench {
    private static final int[] NONE = {};

    /** The yardstick. */
    @State(Scope.Thread)
    public static class Counter {
        final AtomicLong count = new AtomicLong();
    }

    /** One picker, everybody pickable; its public fields are JMH's. */
    @State(Scope.Thread)
    public static class Pool {
        @Param({"round-robin", "weighted-round-robin", "stride", "least-connections"})
        public String method = "";

        @Param({"3", "16", "256", "10000"})
        public int backends;

        Picker picker = new RoundRobin(1, Ramp.NONE);
        int[] inFlight = NONE;

        @Setup
        public void open() {
            picker = picker();
            inFlight = new int[backends];
            for (int member = 0; member < backends; member++) {
                picker.weigh(member, (1 + member % 7) * (long) Picker.MILLI);
                picker.enter(member);
            }
        }

        private Picker picker() {
            return switch (method) {
                case "round-robin" -> new RoundRobin(backends, Ramp.NONE);
                case "weighted-round-robin" -> new WeightedRoundRobin(backends, Ramp.NONE);
                case "stride" -> new Stride(backends);
                case "least-connections" -> new LeastConnections(backends);
                default -> throw new IllegalArgumentException(method);
            };
        }
    }

    @Benchmark
    public long atomicIncrement(Counter counter) {
        return counter.count.incrementAndGet();
    }

    /** A pick, and what every pick brings with it: in flight goes up here and down where the last cycle's pick was. */
    @Benchmark
    public int pick(Pool pool) {
        int member = pool.picker.pick(0, 1, 0, NONE, 0, 0);
        pool.inFlight[member] ^= 1;
        if (pool.inFlight[member] == 1) {
            pool.picker.began(member, 1, 0);
        } else {
            pool.picker.ended(member, 0, true, 0);
        }
        return member;
    }
}
