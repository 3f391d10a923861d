package steelyard.bench;

import java.util.List;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicLong;
import java.util.stream.IntStream;
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
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Stream;
import steelyard.balancer.core.pick.ExpectedDelayOfAll;
import steelyard.balancer.core.pick.ExpectedDelayOfTwo;
import steelyard.balancer.core.pick.Hash;
import steelyard.balancer.core.pick.JoinIdleQueue;
import steelyard.balancer.core.pick.Keys;
import steelyard.balancer.core.pick.LeastConnections;
import steelyard.balancer.core.pick.Lots;
import steelyard.balancer.core.pick.Picker;
import steelyard.balancer.core.pick.Ramp;
import steelyard.balancer.core.pick.Random;
import steelyard.balancer.core.pick.RoundRobin;
import steelyard.balancer.core.pick.Stride;
import steelyard.balancer.core.pick.TwoChoices;
import steelyard.balancer.core.pick.WeightedRandom;
import steelyard.balancer.core.pick.WeightedRoundRobin;

/** The cost of one pick by method and number of backends, beside an atomic increment. Weights are 1 to 7 in turn. */
@BenchmarkMode(Mode.AverageTime)
@OutputTimeUnit(TimeUnit.NANOSECONDS)
@Warmup(iterations = 2, time = 300, timeUnit = TimeUnit.MILLISECONDS)
@Measurement(iterations = 3, time = 300, timeUnit = TimeUnit.MILLISECONDS)
@Fork(1)
public class PicksBench {
    private static final int[] NONE = {};
    private static final long MEMORY_NANOS = 10_000_000_000L;
    private static final int POINTS = 25;
    private static final int PLACES = 65_537;
    private static final Chance CHANCE = new Chance(1);
    private static final Lots LOTS =
            (request, attempt, draw) -> CHANCE.bits(Stream.PICK, request, 64L * attempt + draw);

    /** The yardstick. */
    @State(Scope.Thread)
    public static class Counter {
        final AtomicLong count = new AtomicLong();
    }

    /** One picker, everybody pickable; its public fields are JMH's. */
    @State(Scope.Thread)
    public static class Pool {
        @Param({
            "round-robin",
            "weighted-round-robin",
            "stride",
            "random",
            "weighted-random",
            "weights that move",
            "least-connections",
            "two-choices",
            "join-idle-queue",
            "expected-delay of two",
            "expected-delay of all",
            "hash ring",
            "hash rendezvous",
            "hash permutation"
        })
        public String method = "";

        @Param({"3", "16", "256", "10000"})
        public int backends;

        Picker picker = new RoundRobin(1, Ramp.NONE);
        int[] inFlight = NONE;

        boolean moves;
        long request;

        @Setup
        public void open() {
            moves = method.equals("weights that move");
            picker = picker();
            inFlight = new int[backends];
            for (int member = 0; member < backends; member++) {
                picker.weigh(member, (1 + member % 7) * (long) Picker.MILLI);
                picker.enter(member);
            }
        }

        private List<String> names() {
            return IntStream.range(0, backends).mapToObj(i -> "dunlin-" + i).toList();
        }

        private Picker picker() {
            return switch (method) {
                case "round-robin" -> new RoundRobin(backends, Ramp.NONE);
                case "weighted-round-robin" -> new WeightedRoundRobin(backends, Ramp.NONE);
                case "stride" -> new Stride(backends);
                case "random" -> new Random(backends, LOTS);
                case "weighted-random", "weights that move" -> new WeightedRandom(backends, LOTS);
                case "least-connections" -> new LeastConnections(backends);
                case "two-choices" -> new TwoChoices(backends, LOTS);
                case "join-idle-queue" -> new JoinIdleQueue(backends, LOTS);
                case "expected-delay of two" -> new ExpectedDelayOfTwo(backends, LOTS, MEMORY_NANOS);
                case "expected-delay of all" -> new ExpectedDelayOfAll(backends, MEMORY_NANOS);
                case "hash ring" -> Hash.overRing(names(), POINTS, 0, Ramp.NONE);
                case "hash rendezvous" -> Hash.byRendezvous(names(), 0, Ramp.NONE);
                case "hash permutation" -> Hash.overPermutation(names(), PLACES, 0, Ramp.NONE);
                default -> throw new IllegalArgumentException(method);
            };
        }
    }

    @Benchmark
    public long atomicIncrement(Counter counter) {
        return counter.count.incrementAndGet();
    }

    /**
     * A pick, and what every pick brings with it: in flight goes up here and down where the last cycle's pick was. Each is of
     * another request with another key, a microsecond after the last one. Where weights move, one does before each pick.
     */
    @Benchmark
    public int pick(Pool pool) {
        long request = ++pool.request;
        if (pool.moves) {
            pool.picker.weigh((int) (request % pool.backends), 1 + (request & 1023));
        }
        long now = request * 1_000;
        int member = pool.picker.pick(request, 1, Keys.of(request, 1), NONE, 0, now);
        pool.inFlight[member] ^= 1;
        if (pool.inFlight[member] == 1) {
            pool.picker.began(member, 1, now);
        } else {
            pool.picker.ended(member, 0, true, now);
        }
        return member;
    }
}
