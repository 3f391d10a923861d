package steelyard.outside.stage;

import static steelyard.outside.CheckTable.number;

import java.util.Map;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.drills.model.Drill;
import steelyard.outside.CheckTable;
import steelyard.outside.behave.Sample;

/**
 * {@code drained-in} of m requests in service, exponential with a mean of 60 s: the greatest of m exponentials, 1 + 1/2 +
 * ... + 1/m in the mean (drain.csv). All m come within 1 ms, so next to none is done when the drain begins.
 */
class DrainTest {
    private static final int REPLICATIONS = 500;
    private static final double SERVICE_NANOS = 60e9;

    @ParameterizedTest
    @ValueSource(ints = {1, 2, 5, 20, 100})
    void drainedIn_ofManyInService_isThatOfTheLast(int inService) {
        Map<String, String> row =
                CheckTable.row(DrainTest.class, "drain.csv", r -> number(r, "requests_in_flight_m") == inService);
        Drill drill = WholeStage.read("""
                drill: Drain a busy one
                about: A burst of long requests, then the drain.
                stage:
                  pools:
                    seats:
                      method: round-robin
                      drain: {limit: 3h}
                      timeouts: {first-byte: 3h}
                      serves: {workers: %d, queue: 0, time: {exponential: 60s}}
                      backends: {fulmar: }
                traffic:
                  - {to: seats, arrivals: even, steps: [{for: 1ms, rate: %d/s}, {for: 1s, rate: 0/s}], give-up: 3h}
                lasts: 200ms
                cues: [{at: 2ms, drain: fulmar, as: fulmar drains}]
                expect: [{measure: drained-in, after: fulmar drains, at-most: 3h}, {measure: cut, at-most: 0}]
                """.formatted(inService, inService * 1_000));
        Sample drained = new Sample(REPLICATIONS);
        for (int seed = 1; seed <= REPLICATIONS; seed++) {
            drained.add(WholeStage.measure(drill, seed)[0] / SERVICE_NANOS);
        }
        drained.mustAgreeWith("drained in", number(row, "mean_drain_in_mean_service_times"), 0.05);
    }
}
