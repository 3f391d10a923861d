package steelyard.outside.stage;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.outside.CheckTable.number;

import java.util.Map;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.outside.CheckTable;
import steelyard.outside.behave.Sample;
import steelyard.outside.stage.OpenStage.Setting;

/**
 * How long requests take with some looks at in-flight counts, or all: Mitzenmacher, IEEE TPDS 12(10) 2001, for infinitely many
 * backends (supermarket.csv), and finitely many (supermarket_finite_n.csv). Seeds 1 to 20, chosen beforehand.
 */
class ChoicesTest {
    private static final int REPLICATIONS = 20;
    private static final double WIDEST_ERROR = 0.03;

    @ParameterizedTest
    @CsvSource({
        "two-choices, 4, 0.7, 15000",
        "two-choices, 8, 0.9, 60000",
        "two-choices, 16, 0.8, 20000",
        "two-choices, 32, 0.5, 15000",
        "least-connections, 2, 0.8, 40000",
        "least-connections, 4, 0.7, 15000",
        "least-connections, 8, 0.9, 60000",
        "least-connections, 16, 0.8, 20000"
    })
    void sojourn_finitelyManyBackends_isAsTheTableSays(String method, int backends, double load, long requests) {
        boolean two = method.equals("two-choices");
        Map<String, String> row = CheckTable.row(
                ChoicesTest.class,
                "supermarket_finite_n.csv",
                r -> number(r, "backends_n") == backends
                        && number(r, "lambda") == load
                        && (two
                                ? r.get("choices_d").equals("2")
                                        && r.get("sampling").equals("distinct")
                                : r.get("choices_d").startsWith("all")));
        sojourns(method, backends, load, requests)
                .mustAgreeWith(
                        "mean time in system",
                        number(row, "mean_time_in_system"),
                        number(row, "standard_error"),
                        WIDEST_ERROR);
    }

    /** One look is no look: M/M/1 behind each, whatever the number of backends. */
    @ParameterizedTest
    @CsvSource({"random, 8", "weighted-random, 3"})
    void sojourn_byLot_isThatOfOneWorkerAlone(String method, int backends) {
        sojourns(method, backends, 0.7, 40_000).mustAgreeWith("mean time in system", 1 / (1 - 0.7), WIDEST_ERROR);
    }

    /**
     * Nobody beats looking at all: of equal exponential backends the shortest queue is best (Winston, Journal of Applied
     * Probability 14(1) 1977, abstract read). And any look at what is in flight beats none by far.
     */
    @ParameterizedTest
    @ValueSource(strings = {"two-choices", "join-idle-queue", "expected-delay"})
    void sojourn_equalBackends_liesBetweenAllLooksAndNone(String method) {
        Map<String, String> all = CheckTable.row(
                ChoicesTest.class,
                "supermarket_finite_n.csv",
                r -> number(r, "backends_n") == 8
                        && number(r, "lambda") == 0.9
                        && r.get("choices_d").startsWith("all"));
        assertThat(sojourns(method, 8, 0.9, 40_000).mean())
                .isBetween(number(all, "mean_time_in_system"), 0.5 / (1 - 0.9));
    }

    /** The more backends, the closer to the limit: of the way from 4 to infinitely many, 100 leave less than a tenth. */
    @Test
    void sojourn_moreBackends_approachesTheLimitFromAbove() {
        double limit = number(
                CheckTable.row(
                        ChoicesTest.class,
                        "supermarket.csv",
                        r -> number(r, "choices_d") == 2 && number(r, "lambda") == 0.8),
                "mean_time_in_system_n_infinite");
        double few = sojourns("two-choices", 4, 0.8, 15_000).mean();
        double some = sojourns("two-choices", 16, 0.8, 15_000).mean();
        double many = sojourns("two-choices", 100, 0.8, 30_000).mean();
        assertThat(few).isGreaterThan(some);
        assertThat(some).isGreaterThan(many);
        assertThat(Math.abs(many - limit)).isLessThan((few - limit) / 10);
    }

    private static Sample sojourns(String method, int backends, double load, long requests) {
        Setting set = new Setting(
                method,
                backends,
                1,
                Setting.UNLIMITED,
                load * backends,
                "{exponential: 10ms}",
                requests,
                Double.POSITIVE_INFINITY);
        Sample sojourns = new Sample(REPLICATIONS);
        for (int seed = 1; seed <= REPLICATIONS; seed++) {
            sojourns.add(OpenStage.run(set, seed).meanSojourn());
        }
        return sojourns;
    }
}
