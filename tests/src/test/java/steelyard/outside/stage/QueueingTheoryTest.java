package steelyard.outside.stage;

import static steelyard.outside.CheckTable.number;
import static steelyard.outside.CheckTable.row;

import java.util.Map;
import java.util.function.Predicate;
import java.util.stream.LongStream;
import java.util.stream.Stream;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.outside.behave.Sample;
import steelyard.outside.stage.OpenStage.Measured;
import steelyard.outside.stage.OpenStage.Setting;

/**
 * Pools without trouble against Erlang C, queue limits, Pollaczek-Khinchine and cyclic dispatch. Seeds 1 to 20, chosen
 * beforehand; standard errors of at most 5 %.
 */
class QueueingTheoryTest {
    private static final int REPLICATIONS = 20;
    private static final double WIDEST_ERROR = 0.05;
    private static final String EXPONENTIAL = "{exponential: 10ms}";

    // Erlang's second formula (erlang_c.csv).
    @ParameterizedTest
    @CsvSource({"1, 0.8, 60000", "2, 1.5, 40000", "8, 5.6, 50000", "32, 25.6, 100000"})
    void wait_manyWorkersUnlimitedQueue_isErlangC(int workers, double load, long requests) {
        Map<String, String> row = behaveRow(
                "erlang_c.csv", r -> number(r, "servers_c") == workers && number(r, "offered_load_a_erlang") == load);
        Sample waits = new Sample(REPLICATIONS);
        Sample waiting = new Sample(REPLICATIONS);
        replicate(Setting.oneBackend(workers, Setting.UNLIMITED, load, EXPONENTIAL, requests))
                .forEach(each -> {
                    waits.add(each.meanSojourn() - 1);
                    waiting.add(each.shareThatWaits());
                });
        waiting.mustAgreeWith("share that waits", number(row, "p_wait"), WIDEST_ERROR);
        waits.mustAgreeWith("mean wait", number(row, "mean_wait_in_mean_service_times"), WIDEST_ERROR);
    }

    // M/M/c/K, e.g. Gross and Harris (mmck.csv).
    @ParameterizedTest
    @CsvSource({"1, 4, 0.8, 20000", "2, 8, 1.8, 30000", "4, 16, 4, 40000", "8, 8, 7.2, 40000"})
    void limitedQueue_anyLoad_failsAndWaitsAsTheTableSays(int workers, int queue, double load, long requests) {
        Map<String, String> row = behaveRow(
                "mmck.csv",
                r -> number(r, "servers_c") == workers
                        && number(r, "queue_limit") == queue
                        && number(r, "offered_load_a_erlang") == load);
        Sample failed = new Sample(REPLICATIONS);
        Sample waits = new Sample(REPLICATIONS);
        replicate(Setting.oneBackend(workers, queue, load, EXPONENTIAL, requests))
                .forEach(each -> {
                    failed.add(each.failed());
                    waits.add(each.meanSojourn() - 1);
                });
        failed.mustAgreeWith("share turned away", number(row, "p_reject"), WIDEST_ERROR);
        waits.mustAgreeWith("mean wait", number(row, "mean_wait_of_accepted_in_mean_service_times"), WIDEST_ERROR);
    }

    // Pollaczek-Khinchine; Cooper (1981) p. 189, Tijms sec. 2.5 (mg1.csv).
    @ParameterizedTest
    @CsvSource({
        "M/D/1, 0.8, 0, 40000",
        "M/M/1, 0.7, 1, 40000",
        "M/G/1 lognormal, 0.8, 0.25, 60000",
        "M/G/1 lognormal, 0.5, 4, 200000"
    })
    void wait_oneWorkerAnyService_isPollaczekKhinchine(String model, double load, double variation, long requests) {
        Map<String, String> row = behaveRow(
                "mg1.csv",
                r -> model.equals(r.get("model"))
                        && number(r, "utilisation_rho") == load
                        && number(r, "squared_coefficient_of_variation") == variation);
        Sample waits = new Sample(REPLICATIONS);
        replicate(Setting.oneBackend(1, Setting.UNLIMITED, load, law(model, row), requests))
                .forEach(each -> waits.add(each.meanSojourn() - 1));
        waits.mustAgreeWith("mean wait", number(row, "mean_wait_in_mean_service_times"), WIDEST_ERROR);
    }

    // E_n/M/1; Kleinrock vol. 1 ch. 6 (round_robin.csv). The sojourn is exponential, so 1 in 100 exceeds its 99 %
    // quantile.
    @ParameterizedTest
    @CsvSource({"2, 0.8, 80000", "4, 0.8, 100000", "8, 0.7, 80000"})
    void sojourn_turnsOverSingleWorkers_isThatOfCyclicDispatch(int backends, double load, long requests) {
        Map<String, String> row = row(
                QueueingTheoryTest.class,
                "round_robin.csv",
                r -> r.get("backends_n").equals(String.valueOf(backends)) && number(r, "utilisation_rho") == load);
        double p99 = number(row, "p99_sojourn_in_mean_service_times");
        Sample sojourns = new Sample(REPLICATIONS);
        Sample tails = new Sample(REPLICATIONS);
        replicate(new Setting(
                        "round-robin", backends, 1, Setting.UNLIMITED, load * backends, EXPONENTIAL, requests, p99))
                .forEach(each -> {
                    sojourns.add(each.meanSojourn());
                    tails.add(each.shareThatTakesLong());
                });
        sojourns.mustAgreeWith("mean sojourn", number(row, "mean_sojourn_in_mean_service_times"), WIDEST_ERROR);
        tails.mustAgreeWith("share beyond the 99 % quantile", 0.01, 2 * WIDEST_ERROR);
    }

    private static Stream<Measured> replicate(Setting set) {
        return LongStream.rangeClosed(1, REPLICATIONS).mapToObj(seed -> OpenStage.run(set, seed));
    }

    private static Map<String, String> behaveRow(String table, Predicate<Map<String, String>> fits) {
        return row(QueueingTheoryTest.class, "/steelyard/outside/behave/" + table, fits);
    }

    private static String law(String model, Map<String, String> row) {
        return switch (model) {
            case "M/D/1" -> "10ms";
            case "M/M/1" -> EXPONENTIAL;
            case "M/G/1 lognormal" -> lognormal(number(row, "lognormal_mu_for_mean_1"), number(row, "lognormal_sigma"));
            default -> throw new IllegalArgumentException(model);
        };
    }

    private static String lognormal(double mu, double sigma) {
        // 2.32635 is the 99 % quantile of the standard normal law.
        double median = Math.exp(mu) * WholeStage.SERVICE_NANOS;
        double high = median * Math.exp(2.3263478740408408 * sigma);
        return "{lognormal: {median: %s, 99%%: %s}}"
                .formatted(WholeStage.seconds(Math.round(median)), WholeStage.seconds(Math.round(high)));
    }
}
