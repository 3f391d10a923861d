package steelyard.outside.stage;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.outside.CheckTable.number;

import java.util.Map;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.drills.model.Drill;
import steelyard.outside.CheckTable;
import steelyard.outside.behave.Sample;

/**
 * Attempts a request, and requests that fail, where each attempt fails with chance p whatever became of the others, and
 * the budget allows every retry (retries.csv): (1 - p^(r+1)) / (1 - p) and p^(r+1).
 */
class RetriesTest {
    private static final int REPLICATIONS = 20;
    private static final int REQUESTS = 10_000;

    @ParameterizedTest
    @CsvSource({"0.1, 1", "0.3, 1", "0.3, 2", "0.5, 3", "0.9, 5"})
    void attempts_failingByChance_areAsManyAsDerived(double chance, int retries) {
        Map<String, String> row = CheckTable.row(
                RetriesTest.class,
                "retries.csv",
                r -> number(r, "attempt_failure_probability_p") == chance && number(r, "max_retries_r") == retries);
        Drill drill = WholeStage.read("""
                drill: Try again
                about: Every backend fails a share of what it is asked.
                stage:
                  pools:
                    seats:
                      method: round-robin
                      retry: {at-most: %d, budget: 100%%, bucket: 1000000, also: [503]}
                      serves: {workers: 64, time: 1ms}
                      backends: {fulmar: {times: 6}}
                traffic: [{to: seats, rate: 1000/s}]
                lasts: %ds
                cues: [{at: 0s, fail: {pool: seats}, share: %.0f%%, status: 503}]
                expect: [{measure: retry-load, at-most: 10}, {measure: failed, at-most: 100%%}]
                """.formatted(retries, REQUESTS / 1_000, chance * 100));
        Sample attempts = new Sample(REPLICATIONS);
        double failed = 0;
        for (int seed = 1; seed <= REPLICATIONS; seed++) {
            double[] values = WholeStage.measure(drill, seed);
            attempts.add(values[0]);
            failed += values[1] / REPLICATIONS;
        }
        attempts.mustAgreeWith("attempts a request", number(row, "mean_attempts_per_request"), 0.01);
        double expected = number(row, "probability_request_fails");
        // Binomial: 4 standard deviations.
        double widest = 4 * Math.sqrt(expected * (1 - expected) / (REQUESTS * REPLICATIONS));
        assertThat(Math.abs(failed - expected)).isLessThanOrEqualTo(widest);
    }
}
