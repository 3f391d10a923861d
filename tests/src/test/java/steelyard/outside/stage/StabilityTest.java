package steelyard.outside.stage;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.outside.CheckTable.number;

import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.TestFactory;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Drill;
import steelyard.harness.record.PlayListener;
import steelyard.outside.CheckTable;

/**
 * Backends of unequal speed and no weights that would say so: where a method leaves capacity unused, what is in flight grows
 * without end, at the rate of the fluid limit, though all together could do the work (stability.csv; Bramson, Annals of
 * Applied Probability 21(4) 2011).
 */
class StabilityTest {
    private static final int SEEDS = 3;
    /** The length of a play, in units of time of the table. */
    private static final int UNITS = 6_000;

    private static final long UNIT_NANOS = 10_000_000L;
    private static final double UNITS_PER_SECOND = 1e9 / UNIT_NANOS;

    @TestFactory
    List<DynamicTest> inFlight_everyRow_growsAsTheTableSays() {
        return CheckTable.rows(StabilityTest.class, "stability.csv").stream()
                .map(row -> DynamicTest.dynamicTest(
                        row.get("policy") + ", " + row.get("total_arrival_rate") + " to " + row.get("service_rates"),
                        () -> growsAsTold(row)))
                .toList();
    }

    private static void growsAsTold(Map<String, String> row) {
        double expected = number(row, "backlog_growth_per_unit_time");
        Drill drill = drill(row);
        double growth = 0;
        for (int seed = 1; seed <= SEEDS; seed++) {
            Backlog backlog = new Backlog();
            WholeStage.play(drill, seed, backlog);
            growth += backlog.growthOfSecondHalf() / SEEDS;
        }
        // 5 % of the table where it grows, 0.02 where it does not.
        assertThat(Math.abs(growth - expected)).isLessThanOrEqualTo(expected == 0 ? 0.02 : 0.05 * expected);
    }

    private static Drill drill(Map<String, String> row) {
        StringBuilder backends = new StringBuilder();
        int number = 0;
        for (String rate : row.get("service_rates").split(" ")) {
            long meanNanos = Math.round(UNIT_NANOS / Double.parseDouble(rate));
            backends.append("        fulmar-%d: {serves: {workers: 1, queue: 10000000, time: {exponential: %s}}}%n"
                    .formatted(++number, WholeStage.seconds(meanNanos)));
        }
        return WholeStage.read("""
                drill: Unequal backends
                about: Some are slower than others, and no weight says so.
                stage:
                  connections: 1000000
                  pools:
                    seats:
                      method: %s
                      timeouts: {first-byte: 1h}
                      serves: {time: 1ms}
                      backends:
                %s
                traffic: [{to: seats, arrivals: poisson, rate: %.3f/s, clients: 64, give-up: 1h}]
                lasts: %s
                expect: [{measure: failed, at-most: 99%%}]
                """.formatted(
                        method(row.get("policy")),
                        backends.toString().indent(0).stripTrailing(),
                        number(row, "total_arrival_rate") * UNITS_PER_SECOND,
                        WholeStage.seconds(UNITS * UNIT_NANOS)));
    }

    private static String method(String policy) {
        return switch (policy) {
            case "cyclic" -> "round-robin";
            case "random" -> "random";
            case "two distinct" -> "two-choices";
            case "least requests" -> "least-connections";
            default -> throw new IllegalArgumentException(policy);
        };
    }

    /** What is in flight in the middle and at the end of the traffic. */
    private static final class Backlog implements PlayListener {
        private static final long MIDDLE_NANOS = UNITS / 2 * UNIT_NANOS;
        private static final long END_NANOS = UNITS * UNIT_NANOS;

        private int inMiddle;
        private int atEnd;

        double growthOfSecondHalf() {
            return (double) (atEnd - inMiddle) / (UNITS / 2);
        }

        @Override
        public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
            count(atNanos, 1);
        }

        @Override
        public void attemptEnded(
                long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
            count(atNanos, -1);
        }

        private void count(long atNanos, int change) {
            inMiddle += atNanos < MIDDLE_NANOS ? change : 0;
            atEnd += atNanos < END_NANOS ? change : 0;
        }
    }
}
