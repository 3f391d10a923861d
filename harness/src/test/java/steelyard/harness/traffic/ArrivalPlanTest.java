package steelyard.harness.traffic;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import org.junit.jupiter.api.Test;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Traffic;
import steelyard.drills.model.Traffic.Arrivals;
import steelyard.drills.model.Traffic.Request;
import steelyard.drills.model.Traffic.Step;

class ArrivalPlanTest {
    private static final long SECOND = 1_000_000_000L;
    private static final Request GET = new Request("GET", "/", 0.8, 0, Set.of());
    private static final Request POST = new Request("POST", "/", 0.2, 10, Set.of());

    @Test
    void even_rate_spacesRequestsFromHalfAGap() {
        assertThat(dues(plan(2 * SECOND, even(step(2, 4)))))
                .containsExactly(
                        125L * 1_000_000,
                        375L * 1_000_000,
                        625L * 1_000_000,
                        875L * 1_000_000,
                        1125L * 1_000_000,
                        1375L * 1_000_000,
                        1625L * 1_000_000,
                        1875L * 1_000_000);
    }

    @Test
    void even_rateThatDividesNoNanosecond_keepsItsCount() {
        assertThat(dues(plan(60 * SECOND, even(step(60, 333))))).hasSize(60 * 333);
    }

    @Test
    void steps_withASilentStretch_keepTheGapOverIt() {
        // One request after half a second at 1/s, then half a gap is used up, nothing for 2 s, the rest at 2/s.
        assertThat(dues(plan(5 * SECOND, even(step(1, 1), step(2, 0), step(2, 2)))))
                .containsExactly(
                        SECOND / 2,
                        3 * SECOND + SECOND / 4,
                        3 * SECOND + 3 * SECOND / 4,
                        4 * SECOND + SECOND / 4,
                        4 * SECOND + 3 * SECOND / 4);
    }

    @Test
    void lastStep_holdsToTheEnd() {
        assertThat(dues(plan(10 * SECOND, even(step(1, 1))))).hasSize(10);
    }

    @Test
    void zeroRate_hasNothing() {
        ArrivalPlan plan = plan(SECOND, even(step(1, 0)));
        assertThat(plan.hasNext()).isFalse();
        assertThatThrownBy(plan::take).isInstanceOf(IllegalStateException.class);
    }

    @Test
    void surge_inAGap_rescalesWhatRemainsOfIt() {
        ArrivalPlan plan = plan(10 * SECOND, even(step(10, 1)));
        plan.take(); // at 0.5 s; the next would be due at 1.5 s
        plan.surge(0, 4, SECOND); // half of the gap is left: an eighth of a second now
        assertThat(plan.nextDueNanos()).isEqualTo(SECOND + SECOND / 8);
        plan.take();
        assertThat(plan.nextDueNanos()).isEqualTo(SECOND + SECOND / 8 + SECOND / 4);
        plan.surge(0, 1, SECOND + SECOND / 4); // half of a gap of a quarter is left
        assertThat(plan.nextDueNanos()).isEqualTo(SECOND + SECOND / 4 + SECOND / 2);
    }

    @Test
    void surge_toNothingAndBack_holdsTheGap() {
        ArrivalPlan plan = plan(10 * SECOND, even(step(10, 1)));
        plan.surge(0, 0, SECOND / 4);
        assertThat(plan.hasNext()).isFalse();
        plan.surge(0, 1, 5 * SECOND);
        assertThat(plan.nextDueNanos()).isEqualTo(5 * SECOND + SECOND / 4);
    }

    @Test
    void poisson_count_agreesWithTheRate() {
        // The count over all seeds is Poisson with mean 40 x (2 x 300 + 1 x 0 + 2 x 50) = 28,000: 4 deviations are 670.
        long count = 0;
        for (long seed = 0; seed < 40; seed++) {
            count += dues(new ArrivalPlan(
                            List.of(traffic("a", Arrivals.POISSON, 1, 0, step(2, 300), step(1, 0), step(2, 50))),
                            5 * SECOND,
                            new Chance(seed)))
                    .size();
        }
        assertThat(count).isCloseTo(28_000L, within(670L));
    }

    @Test
    void poisson_gaps_haveTheMomentsOfAnExponentialLaw() {
        List<Long> dues = dues(plan(100 * SECOND, traffic("a", Arrivals.POISSON, 1, 0, step(1, 1_000))));
        double mean = 0;
        double square = 0;
        for (int i = 1; i < dues.size(); i++) {
            double gap = (dues.get(i) - dues.get(i - 1)) / 1e6;
            mean += gap / (dues.size() - 1);
            square += gap * gap / (dues.size() - 1);
        }
        // Of 100,000 gaps: the mean within 4 / sqrt(1e5) of 1, the second moment (2, deviation sqrt(20)) likewise.
        assertThat(mean).isCloseTo(1, within(0.0127));
        assertThat(square).isCloseTo(2, within(0.0566));
    }

    @Test
    void sameSeed_sameRequests_otherSeedOthers() {
        assertThat(requests(7)).isEqualTo(requests(7)).isNotEqualTo(requests(8));
    }

    @Test
    void changeOfOneStream_leavesTheOther() {
        Traffic steady = traffic("a", Arrivals.POISSON, 5, 0.5, step(1, 100));
        List<String> alone = ofStream(0, List.of(steady));
        assertThat(ofStream(0, List.of(steady, traffic("b", Arrivals.POISSON, 1, 0, step(1, 500)))))
                .isEqualTo(alone);
    }

    @Test
    void streams_areMergedInOrderOfTime() {
        ArrivalPlan plan = plan(2 * SECOND, even(step(1, 4)), even(step(1, 10)));
        long latest = 0;
        for (long number = 0; plan.hasNext(); number++) {
            plan.take();
            assertThat(plan.request()).isEqualTo(number);
            assertThat(plan.dueNanos()).isGreaterThanOrEqualTo(latest);
            latest = plan.dueNanos();
        }
        assertThat(plan.request()).isEqualTo(2 * 14 - 1);
    }

    @Test
    void mix_followsItsShares() {
        ArrivalPlan plan = plan(10 * SECOND, even(step(1, 1_000)));
        int posts = 0;
        while (plan.hasNext()) {
            plan.take();
            posts += plan.kind();
        }
        // Binomial, 10,000 of 0.2: 4 deviations are 160.
        assertThat(posts).isBetween(1_840, 2_160);
    }

    @Test
    void skew_givesClientsTheirSharesByZipfsLaw() {
        ArrivalPlan plan = plan(10 * SECOND, traffic("a", Arrivals.EVEN, 4, 1, step(1, 1_000)));
        int[] counts = new int[4];
        while (plan.hasNext()) {
            plan.take();
            counts[plan.client()]++;
        }
        for (int k = 0; k < 4; k++) {
            double share = 1.0 / (k + 1) / (1 + 1 / 2.0 + 1 / 3.0 + 1 / 4.0);
            double deviation = Math.sqrt(share * (1 - share) * 10_000);
            assertThat((double) counts[k]).isCloseTo(share * 10_000, within(4 * deviation));
        }
    }

    private static List<String> requests(long seed) {
        ArrivalPlan plan = new ArrivalPlan(
                List.of(traffic("a", Arrivals.POISSON, 5, 0.5, step(1, 100))), SECOND, new Chance(seed));
        List<String> all = new ArrayList<>();
        while (plan.hasNext()) {
            plan.take();
            all.add(plan.dueNanos() + " " + plan.kind() + " " + plan.client());
        }
        return all;
    }

    private static List<String> ofStream(int stream, List<Traffic> traffic) {
        ArrivalPlan plan = new ArrivalPlan(traffic, SECOND, new Chance(7));
        List<String> all = new ArrayList<>();
        while (plan.hasNext()) {
            plan.take();
            if (plan.traffic() == stream) {
                all.add(plan.dueNanos() + " " + plan.kind() + " " + plan.client());
            }
        }
        assertThat(all).isNotEmpty();
        return all;
    }

    private static List<Long> dues(ArrivalPlan plan) {
        List<Long> dues = new ArrayList<>();
        while (plan.hasNext()) {
            assertThat(plan.nextDueNanos()).isLessThan(Long.MAX_VALUE);
            plan.take();
            dues.add(plan.dueNanos());
        }
        return dues;
    }

    private static ArrivalPlan plan(long lastsNanos, Traffic... traffic) {
        return new ArrivalPlan(List.of(traffic), lastsNanos, new Chance(7));
    }

    private static Traffic even(Step... steps) {
        return traffic("a", Arrivals.EVEN, 1, 0, steps);
    }

    private static Traffic traffic(String pool, Arrivals arrivals, int clients, double skew, Step... steps) {
        return new Traffic(pool, arrivals, List.of(steps), clients, skew, SECOND, List.of(GET, POST));
    }

    private static Step step(long seconds, double perSecond) {
        return new Step(seconds * SECOND, perSecond);
    }
}
