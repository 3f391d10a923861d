package steelyard.outside.core;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.outside.CheckTable.number;

import java.util.Map;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Stream;
import steelyard.balancer.core.pick.LeastConnections;
import steelyard.balancer.core.pick.Lots;
import steelyard.balancer.core.pick.Picker;
import steelyard.balancer.core.pick.TwoChoices;
import steelyard.outside.CheckTable;
import steelyard.outside.behave.Sample;

/**
 * Ten backends at a load of 0.9 whose in-flight counts are published every T mean service times, and in between not
 * (stale.csv; setting of Mitzenmacher, How Useful Is Old Information?, IEEE TPDS 11(1) 2000). Old counts turn the order of
 * methods round: everybody runs to who was idle a while ago. Seeds 1 to 20, chosen beforehand.
 */
class StaleCountsTest {
    private static final int REPLICATIONS = 20;
    private static final double WIDEST_ERROR = 0.05;
    private static final int BACKENDS = 10;
    private static final double LOAD = 0.9;
    /** 20/(1 - rho)^2 mean service times. */
    private static final double WARM_UP = 2_000;

    private static final int REQUESTS = 40_000;

    /** How often counts are published, and which methods follow one another, from fast to slow. */
    @ParameterizedTest
    @CsvSource({"0.1, least two random", "1, two least random", "10, two random least", "50, random two least"})
    void sojourn_countsOfAge_ordersMethodsAsTheTableDoes(double every, String order) {
        Map<String, String> row = CheckTable.row(
                StaleCountsTest.class,
                "stale.csv",
                r -> number(r, "backends_n") == BACKENDS
                        && number(r, "update_period_T_in_mean_service_times") == every);
        Sample two = new Sample(REPLICATIONS);
        Sample least = new Sample(REPLICATIONS);
        for (int seed = 1; seed <= REPLICATIONS; seed++) {
            Chance chance = new Chance(seed);
            Lots lots = (request, attempt, draw) -> chance.bits(Stream.PICK, request, 64L * attempt + draw);
            two.add(new Board(new TwoChoices(BACKENDS, lots), chance, every).meanSojourn());
            least.add(new Board(new LeastConnections(BACKENDS), chance, every).meanSojourn());
        }
        two.mustAgreeWith(
                "two choices",
                number(row, "two_choices_on_stale_counts_mean_time"),
                number(row, "se_two"),
                WIDEST_ERROR);
        double random = 1 / (1 - LOAD);
        Map<String, Double> means = Map.of("two", two.mean(), "least", least.mean(), "random", random);
        String[] words = order.split(" ");
        for (int i = 1; i < words.length; i++) {
            // A tenth apart at least. Least breaks ties in rotation where the table draws lots, so its own value may
            // differ.
            assertThat(means.get(words[i])).as(means.toString()).isGreaterThan(1.1 * means.get(words[i - 1]));
        }
    }

    /** Backends of one exponential worker each, and a picker that hears of them only at times. */
    private static final class Board {
        private final Picker picker;
        private final Chance chance;
        private final double every;
        private final double[][] doneAt = new double[BACKENDS][16];
        private final int[] from = new int[BACKENDS];
        private final int[] to = new int[BACKENDS];

        Board(Picker picker, Chance chance, double every) {
            this.picker = picker;
            this.chance = chance;
            this.every = every;
            for (int member = 0; member < BACKENDS; member++) {
                picker.enter(member);
            }
        }

        double meanSojourn() {
            double now = 0;
            double published = 0;
            double sum = 0;
            int measured = 0;
            for (long request = 0; measured < REQUESTS; request++) {
                now += chance.exponential(Stream.ARRIVALS, request, 0) / (LOAD * BACKENDS);
                if (now >= published) {
                    published = Math.floor(now / every) * every;
                    publish(published);
                    published += every;
                }
                int member = picker.pick(request, 1, 0, new int[0], 0, 0);
                double free = from[member] == to[member] ? now : Math.max(now, doneAt[member][last(member)]);
                double done = free + chance.exponential(Stream.SERVICE, request, 0);
                add(member, done);
                if (now >= WARM_UP) {
                    sum += done - now;
                    measured++;
                }
            }
            return sum / measured;
        }

        private int last(int member) {
            return (to[member] - 1) % doneAt[member].length;
        }

        /** Times at which what is in flight will be done, the earliest first: a ring that grows. */
        private void add(int member, double done) {
            double[] ring = doneAt[member];
            if (to[member] - from[member] == ring.length) {
                double[] wider = new double[2 * ring.length];
                for (int i = from[member]; i < to[member]; i++) {
                    wider[i % wider.length] = ring[i % ring.length];
                }
                doneAt[member] = wider;
            }
            doneAt[member][to[member]++ % doneAt[member].length] = done;
        }

        private void publish(double at) {
            for (int member = 0; member < BACKENDS; member++) {
                while (from[member] < to[member] && doneAt[member][from[member] % doneAt[member].length] <= at) {
                    from[member]++;
                }
                picker.began(member, to[member] - from[member], 0);
            }
        }
    }
}
