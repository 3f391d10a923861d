package steelyard.outside.stage;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.stream.Collectors;
import java.util.stream.IntStream;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.TestFactory;
import steelyard.harness.record.PlayListener;
import steelyard.outside.CheckTable;

/**
 * The order in which a played pool picks, against the interleaved weighted order (iwrr.csv; Katevenis, Sidiropoulos,
 * Courcoubetis, IEEE JSAC 9(8) 1991; Tabatabaee, Le Boudec, Boyer, IEICE Trans. Commun. E104-B(12) 2021): equality over
 * three cycles.
 */
class InterleavedOrderTest {
    private static final int CYCLES = 3;
    private static final int PER_SECOND = 100;

    @TestFactory
    List<DynamicTest> picks_byWeights_followThePublishedOrder() {
        return CheckTable.rows(InterleavedOrderTest.class, "/steelyard/outside/core/iwrr.csv").stream()
                .map(row -> DynamicTest.dynamicTest(
                        row.get("weights_in_list_order"),
                        () -> assertThat(played(
                                        row.get("weights_in_list_order"), (int) CheckTable.number(row, "cycle_length")))
                                .isEqualTo(row.get("order_one_cycle").repeat(CYCLES))))
                .toList();
    }

    /** Backend A is the first of the list, B the second ... */
    private static String played(String weights, int cycle) {
        String[] each = weights.split(":");
        String backends = IntStream.range(0, each.length)
                .mapToObj(i -> "fulmar" + i + ": {weight: " + each[i] + "}")
                .collect(Collectors.joining(", "));
        String text = """
                drill: An order
                about: Evenly spaced requests, in the order of their weights.
                stage:
                  pools:
                    seats: {method: weighted-round-robin, serves: {workers: 4, time: 1ms}, backends: {%s}}
                traffic: [{to: seats, arrivals: even, rate: %d/s}]
                lasts: %dms
                expect: [{measure: failed, at-most: 0%%}]
                """.formatted(backends, PER_SECOND, cycle * CYCLES * 1_000 / PER_SECOND);
        StringBuilder order = new StringBuilder();
        double[] values = WholeStage.measure(WholeStage.read(text), 1, new PlayListener() {
            @Override
            public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
                order.append((char) ('A' + backend));
            }
        });
        assertThat(values).containsExactly(0);
        return order.toString();
    }
}
