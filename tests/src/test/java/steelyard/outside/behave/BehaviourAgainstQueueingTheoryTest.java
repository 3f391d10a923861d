package steelyard.outside.behave;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.outside.CheckTable.number;
import static steelyard.outside.behave.OpenQueue.MEAN_SERVICE_NANOS;

import java.util.List;
import java.util.Map;
import java.util.function.Predicate;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.ServiceTime;
import steelyard.backends.behave.ServiceTime.Exponential;
import steelyard.backends.behave.ServiceTime.Fixed;
import steelyard.backends.behave.ServiceTime.Gamma;
import steelyard.backends.behave.ServiceTime.Lognormal;
import steelyard.backends.behave.ServiceTime.Order;
import steelyard.backends.behave.ServiceTime.Trace;
import steelyard.outside.CheckTable;

/**
 * One backend against Erlang C, the table of queue limits and Pollaczek-Khinchine. Seeds 1 to 20, chosen beforehand;
 * standard errors of at most 5 %.
 */
class BehaviourAgainstQueueingTheoryTest {

    private static final int REPLICATIONS = 20;
    private static final double WIDEST_ERROR = 0.05;
    private static final int UNLIMITED = Integer.MAX_VALUE;

    // Erlang's second formula (erlang_c.csv).
    @ParameterizedTest
    @CsvSource({
        "1, 0.5, 20000",
        "1, 0.8, 60000",
        "2, 1.5, 40000",
        "4, 3.2, 60000",
        "8, 5.6, 50000",
        "8, 7.2, 120000",
        "16, 12.8, 80000",
        "32, 25.6, 100000",
        "64, 57.6, 250000"
    })
    void wait_manyWorkersUnlimitedQueue_isErlangC(int workers, double load, long arrivals) {
        Map<String, String> row = row(
                "erlang_c.csv", r -> number(r, "servers_c") == workers && number(r, "offered_load_a_erlang") == load);
        BehaviourSettings settings = BehaviourSettings.of(workers, UNLIMITED, new Exponential(MEAN_SERVICE_NANOS));
        Sample waits = new Sample(REPLICATIONS);
        Sample waiting = new Sample(REPLICATIONS);
        for (int seed = 1; seed <= REPLICATIONS; seed++) {
            OpenQueue.Measured measured = OpenQueue.run(settings, load, arrivals, seed);
            waits.add(measured.meanWait());
            waiting.add(measured.shareThatWaits());
        }
        waiting.mustAgreeWith("share that waits", number(row, "p_wait"), WIDEST_ERROR);
        waits.mustAgreeWith("mean wait", number(row, "mean_wait_in_mean_service_times"), WIDEST_ERROR);
    }

    // M/M/c/K, e.g. Gross and Harris (mmck.csv).
    @ParameterizedTest
    @CsvSource({
        "1, 4, 0.8, 20000",
        "1, 9, 1, 30000",
        "1, 9, 1.5, 30000",
        "2, 8, 1.8, 30000",
        "4, 4, 3.6, 20000",
        "4, 16, 4, 40000",
        "8, 8, 7.2, 40000",
        "8, 32, 10, 40000",
        "16, 16, 15.2, 80000"
    })
    void limitedQueue_anyLoad_rejectsAndWaitsAsTheTableSays(int workers, int queue, double load, long arrivals) {
        Map<String, String> row = row(
                "mmck.csv",
                r -> number(r, "servers_c") == workers
                        && number(r, "queue_limit") == queue
                        && number(r, "offered_load_a_erlang") == load);
        BehaviourSettings settings = BehaviourSettings.of(workers, queue, new Exponential(MEAN_SERVICE_NANOS));
        Sample rejects = new Sample(REPLICATIONS);
        Sample waits = new Sample(REPLICATIONS);
        Sample busy = new Sample(REPLICATIONS);
        for (int seed = 1; seed <= REPLICATIONS; seed++) {
            OpenQueue.Measured measured = OpenQueue.run(settings, load, arrivals, seed);
            rejects.add(measured.rejectShare());
            waits.add(measured.meanWait());
            busy.add(measured.utilisation());
        }
        rejects.mustAgreeWith("share rejected", number(row, "p_reject"), WIDEST_ERROR);
        waits.mustAgreeWith("mean wait", number(row, "mean_wait_of_accepted_in_mean_service_times"), WIDEST_ERROR);
        busy.mustAgreeWith("utilisation", number(row, "worker_utilisation"), WIDEST_ERROR);
    }

    // Pollaczek-Khinchine; Cooper (1981) p. 189, Tijms sec. 2.5 (mg1.csv).
    @ParameterizedTest
    @CsvSource({
        "M/D/1, 0.5, 0, 20000",
        "M/D/1, 0.8, 0, 40000",
        "M/M/1, 0.7, 1, 40000",
        "M/M/1, 0.9, 1, 150000",
        "M/G/1 lognormal, 0.5, 0.25, 20000",
        "M/G/1 lognormal, 0.8, 0.25, 60000",
        "M/G/1 lognormal, 0.8, 1, 80000",
        "M/G/1 lognormal, 0.5, 4, 300000"
    })
    void wait_oneWorkerAnyService_isPollaczekKhinchine(String model, double load, double variation, long arrivals) {
        Map<String, String> row = row(
                "mg1.csv",
                r -> model.equals(r.get("model"))
                        && number(r, "utilisation_rho") == load
                        && number(r, "squared_coefficient_of_variation") == variation);
        ServiceTime time = service(model, row);
        assertThat(Math.abs(time.meanNanos() / MEAN_SERVICE_NANOS - 1)).isLessThan(1e-6);
        assertThat(Math.abs(time.squaredVariation() - variation)).isLessThan(1e-6);
        BehaviourSettings settings = BehaviourSettings.of(1, UNLIMITED, time);
        Sample waits = new Sample(REPLICATIONS);
        for (int seed = 1; seed <= REPLICATIONS; seed++) {
            waits.add(OpenQueue.run(settings, load, arrivals, seed).meanWait());
        }
        waits.mustAgreeWith("mean wait", number(row, "mean_wait_in_mean_service_times"), WIDEST_ERROR);
    }

    // The formula knows of a service time only its mean and variation, so a row holds for every law that has these:
    // gamma of
    // shape 1 / variation (Erlang's two phases at 0.5), and a trace of 0.5 and 1.5, whose variation is 0.25.
    @ParameterizedTest
    @CsvSource({
        "gamma, M/E2/1, 0.5, 0.5, 20000",
        "gamma, M/E2/1, 0.8, 0.5, 60000",
        "gamma, M/G/1 lognormal, 0.8, 0.25, 60000",
        "gamma, M/G/1 lognormal, 0.5, 4, 100000",
        "trace, M/G/1 lognormal, 0.5, 0.25, 20000",
        "trace, M/G/1 lognormal, 0.8, 0.25, 60000"
    })
    void wait_gammaAndTracedService_isPollaczekKhinchine(
            String law, String model, double load, double variation, long arrivals) {
        Map<String, String> row = row(
                "mg1.csv",
                r -> model.equals(r.get("model"))
                        && number(r, "utilisation_rho") == load
                        && number(r, "squared_coefficient_of_variation") == variation);
        ServiceTime time = law.equals("gamma")
                ? new Gamma(MEAN_SERVICE_NANOS, 1 / variation)
                : new Trace(new long[] {MEAN_SERVICE_NANOS / 2, MEAN_SERVICE_NANOS / 2 * 3}, Order.SAMPLED);
        assertThat(time.meanNanos()).isEqualTo(MEAN_SERVICE_NANOS);
        assertThat(time.squaredVariation()).isEqualTo(variation);
        BehaviourSettings settings = BehaviourSettings.of(1, UNLIMITED, time);
        Sample waits = new Sample(REPLICATIONS);
        for (int seed = 1; seed <= REPLICATIONS; seed++) {
            waits.add(OpenQueue.run(settings, load, arrivals, seed).meanWait());
        }
        waits.mustAgreeWith("mean wait", number(row, "mean_wait_in_mean_service_times"), WIDEST_ERROR);
    }

    /** The one row that fits. */
    private static Map<String, String> row(String table, Predicate<Map<String, String>> fits) {
        List<Map<String, String>> found = CheckTable.rows(BehaviourAgainstQueueingTheoryTest.class, table).stream()
                .filter(fits)
                .toList();
        assertThat(found).hasSize(1);
        return found.get(0);
    }

    private static ServiceTime service(String model, Map<String, String> row) {
        return switch (model) {
            case "M/D/1" -> new Fixed(MEAN_SERVICE_NANOS);
            case "M/M/1" -> new Exponential(MEAN_SERVICE_NANOS);
            case "M/G/1 lognormal" -> lognormal(number(row, "lognormal_mu_for_mean_1"), number(row, "lognormal_sigma"));
            default -> throw new IllegalArgumentException(model);
        };
    }

    private static Lognormal lognormal(double mu, double sigma) {
        // 2.32635 is the 99 % quantile of the standard normal law.
        double median = Math.exp(mu) * MEAN_SERVICE_NANOS;
        return new Lognormal(Math.round(median), Math.round(median * Math.exp(2.3263478740408408 * sigma)));
    }
}
