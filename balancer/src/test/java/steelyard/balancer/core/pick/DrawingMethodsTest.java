package steelyard.balancer.core.pick;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;

/** The methods that draw lots or look at what is in flight, each by its own rule and by the contract of all. */
class DrawingMethodsTest {
    private static final int[] NONE = {};
    private static final Lots LOTS = (request, attempt, draw) -> Keys.of(Keys.of(request, attempt), draw);
    private static final long SECOND = 1_000_000_000L;

    @Nested
    class OfRandom extends PickerContract {
        @Override
        Picker picker(int members, Ramp ramp) {
            return new Random(members, LOTS);
        }

        @Test
        void weighs_always_isNot() {
            assertThat(picker(1, Ramp.NONE).weighs()).isFalse();
        }
    }

    @Nested
    class OfWeightedRandom extends PickerContract {
        @Override
        Picker picker(int members, Ramp ramp) {
            return new WeightedRandom(members, LOTS);
        }

        @Test
        void pick_weightZero_isNeverPicked() {
            Picker picker = full(3);
            picker.weigh(1, 0);
            assertThat(PickerContract.serve(picker, 300, 3)[1]).isZero();
        }

        @Test
        void pick_sameLots_isTheSameMember() {
            Picker picker = full(5);
            PickerContract.serve(picker, 20, 5);
            assertThat(picker.pick(77, 1, 0, NONE, 0, 0)).isEqualTo(picker.pick(77, 1, 0, NONE, 0, 5));
        }
    }

    @Nested
    class OfTwoChoices extends PickerContract {
        @Override
        Picker picker(int members, Ramp ramp) {
            return new TwoChoices(members, LOTS);
        }

        /** Two of two are always compared: the busier one is never picked. */
        @Test
        void pick_twoMembers_isTheOneWithFewerOverWeight() {
            Picker picker = full(2);
            picker.weigh(0, 3_000);
            picker.began(0, 4, 0);
            picker.began(1, 1, 0);
            // 4/3 against 1/1.
            assertThat(picked(2, picker, 50)).containsExactly(0, 50);
            picker.ended(0, 2, true, 0);
            // 2/3 against 1/1.
            assertThat(picked(2, picker, 50)).containsExactly(50, 0);
        }

        /** Of three, the busiest is never the better of two, and the idlest wins two pairs of three. */
        @Test
        void pick_threeMembers_neverTakesTheBusiest() {
            Picker picker = full(3);
            picker.began(0, 3, 0);
            picker.began(1, 2, 0);
            picker.began(2, 1, 0);
            int[] picked = picked(3, picker, 900);
            assertThat(picked[0]).isZero();
            // Binomial with p = 1/3: 300, 4 standard deviations are 57.
            assertThat(picked[1]).isBetween(243, 357);
        }
    }

    @Nested
    class OfJoinIdleQueue extends PickerContract {
        @Override
        Picker picker(int members, Ramp ramp) {
            return new JoinIdleQueue(members, LOTS);
        }

        @Test
        void pick_someIdle_isTheOneIdleForLongest() {
            Picker picker = full(3);
            picker.began(0, 1, 0);
            picker.began(1, 1, 0);
            picker.began(2, 1, 0);
            picker.ended(1, 0, true, 5);
            picker.ended(0, 0, true, 6);
            assertThat(picker.pick(1, 1, 0, NONE, 0, 7)).isEqualTo(1);
            assertThat(picker.pick(1, 2, 0, new int[] {1}, 1, 7)).isZero();
            picker.began(1, 1, 7);
            assertThat(picker.pick(2, 1, 0, NONE, 0, 7)).isZero();
        }

        /** The weight told is that of one, ramped: the first warms at a third. */
        @Test
        void pick_nobodyIdle_isByLot() {
            Picker picker = full(2);
            picker.weigh(0, 333);
            picker.began(0, 1, 0);
            picker.began(1, 9, 0);
            assertThat(picker.weighs()).isFalse();
            // Binomial with p = 3/4: 300, 4 standard deviations are 35; what is in flight plays no part.
            assertThat(picked(2, picker, 400)[1]).isBetween(265, 335);
        }

        @Test
        void enter_idle_joinsAtTheEnd() {
            Picker picker = full(3);
            picker.leave(0);
            picker.enter(0);
            assertThat(picker.pick(1, 1, 0, NONE, 0, 0)).isEqualTo(1);
            assertThat(picker.pick(1, 2, 0, new int[] {1, 2}, 2, 0)).isZero();
        }
    }

    /** What both kinds of the shortest expected delay share, on two members, where both look at everybody. */
    abstract static class OfExpectedDelay extends PickerContract {
        /** One member answers after 1 s, the other after 3 s. */
        private Picker oneFastOneSlow() {
            Picker picker = full(2);
            serveOnce(picker, 0, 0, SECOND);
            serveOnce(picker, 1, 0, 3 * SECOND);
            return picker;
        }

        @Test
        void pick_timesSeen_isTheShorterDelay() {
            Picker picker = oneFastOneSlow();
            assertThat(picked(2, picker, 20, 3 * SECOND)).containsExactly(20, 0);
            picker.began(0, 3, 3 * SECOND);
            // 4 x 1 s against 1 x 3 s.
            assertThat(picked(2, picker, 20, 3 * SECOND)).containsExactly(0, 20);
            picker.weigh(0, 2_000);
            // 4 x 1 s / 2 against 1 x 3 s.
            assertThat(picked(2, picker, 20, 3 * SECOND)).containsExactly(20, 0);
        }

        @Test
        void pick_attemptWithoutAnswer_isNotSeen() {
            Picker picker = oneFastOneSlow();
            picker.began(1, 1, 3 * SECOND);
            picker.ended(1, 0, false, 3 * SECOND + 1);
            assertThat(picked(2, picker, 20, 3 * SECOND + 1)).containsExactly(20, 0);
        }

        /** The third is new, at the mean of 1 s and 3 s: it comes before who takes 3 s and after who takes 1 s. */
        @Test
        void pick_memberNotSeen_countsAtTheMeanOfTheOthers() {
            Picker picker = full(3);
            serveOnce(picker, 0, 0, SECOND);
            serveOnce(picker, 1, 0, 3 * SECOND);
            long now = 3 * SECOND;
            assertThat(picker.pick(1, 2, 0, new int[] {1}, 1, now)).isZero();
            assertThat(picker.pick(1, 2, 0, new int[] {0}, 1, now)).isEqualTo(2);
            // 3 x 1 s against 1 x 2 s.
            picker.began(0, 2, now);
            assertThat(picker.pick(1, 2, 0, new int[] {1}, 1, now)).isEqualTo(2);
        }

        /** The slow one is shunned until its memory, 10 s, is over; then both count the same again. */
        @Test
        void pick_nothingSeenForTheMemoryTime_triesAgain() {
            Picker picker = oneFastOneSlow();
            long late = 14 * SECOND;
            serveOnce(picker, 0, 10 * SECOND, 11 * SECOND);
            assertThat(picked(2, picker, 40, 13 * SECOND)).containsExactly(40, 0);
            assertThat(picked(2, picker, 40, late)[1]).isPositive();
        }

        /** A picker made in the middle of a play hears first of the third in flight, and counts from then. */
        @Test
        void began_othersAlreadyInFlight_countsFromThen() {
            Picker picker = full(2);
            picker.began(0, 3, 100 * SECOND);
            picker.ended(0, 2, true, 101 * SECOND);
            serveOnce(picker, 1, 100 * SECOND, 104 * SECOND);
            // 3 x 1 s against 1 x 4 s.
            assertThat(picked(2, picker, 20, 104 * SECOND)).containsExactly(20, 0);
        }

        @Test
        void ended_waitingBehindAnother_seesTheTimeBetweenAnswers() {
            Picker picker = full(2);
            // Two begin together on a worker that takes 2 s for each: they end after 2 s and 4 s, and 2 s is what is
            // seen.
            picker.began(0, 1, 0);
            picker.began(0, 2, 0);
            picker.ended(0, 1, true, 2 * SECOND);
            picker.ended(0, 0, true, 4 * SECOND);
            serveOnce(picker, 1, 0, 5 * SECOND / 2);
            assertThat(picked(2, picker, 20, 4 * SECOND)).containsExactly(20, 0);
        }

        private static void serveOnce(Picker picker, int member, long beganNanos, long endedNanos) {
            picker.began(member, 1, beganNanos);
            picker.ended(member, 0, true, endedNanos);
        }
    }

    @Nested
    class OfExpectedDelayOfTwo extends OfExpectedDelay {
        @Override
        Picker picker(int members, Ramp ramp) {
            return new ExpectedDelayOfTwo(members, LOTS, 10 * SECOND);
        }
    }

    @Nested
    class OfExpectedDelayOfAll extends OfExpectedDelay {
        @Override
        Picker picker(int members, Ramp ramp) {
            return new ExpectedDelayOfAll(members, 10 * SECOND);
        }

        @Test
        void pick_equalDelays_areInRotation() {
            assertThat(picked(4, full(4), 12)).containsOnly(3);
        }
    }

    private static int[] picked(int members, Picker picker, int picks) {
        return picked(members, picker, picks, 0);
    }

    /** Who is picked how often, with nothing begun. */
    private static int[] picked(int members, Picker picker, int picks, long nowNanos) {
        int[] picked = new int[members];
        for (int i = 0; i < picks; i++) {
            picked[picker.pick(i, 1, 0, NONE, 0, nowNanos)]++;
        }
        return picked;
    }
}
