package steelyard.balancer.core.pick;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;

/** Each method by its own rule; the contract that all share runs for each. */
class MethodsTest {
    private static final int[] NONE = {};

    @Nested
    class OfRoundRobin extends TurnsContract {
        @Override
        Picker picker(int members, Ramp ramp) {
            return new RoundRobin(members, ramp);
        }

        @Test
        void pick_afterALeave_goesOnAfterTheLastServed() {
            Picker picker = all(new RoundRobin(4, Ramp.NONE), 1, 1, 1, 1);
            assertThat(order(picker, 2)).isEqualTo("AB");
            picker.leave(2);
            assertThat(order(picker, 4)).isEqualTo("DABD");
            picker.enter(2);
            assertThat(order(picker, 4)).isEqualTo("ABCD");
        }
    }

    @Nested
    class OfWeightedRoundRobin extends TurnsContract {
        @Override
        Picker picker(int members, Ramp ramp) {
            return new WeightedRoundRobin(members, ramp);
        }

        @Test
        void pick_threeSixTwelve_isInterleavedInEveryCycle() {
            Picker picker = all(new WeightedRoundRobin(3, Ramp.NONE), 3, 6, 12);
            for (int cycle = 0; cycle < 5; cycle++) {
                assertThat(order(picker, 21)).isEqualTo("ABCABCABCBCBCBCCCCCCC");
            }
        }

        @Test
        void pick_withOneAway_keepsTheOrderOfTheRest() {
            Picker picker = all(new WeightedRoundRobin(3, Ramp.NONE), 3, 2, 1);
            picker.leave(1);
            assertThat(order(picker, 8)).isEqualTo("ACAAACAA");
        }

        @Test
        void enter_placeBehind_takesTheFirstOfTheOthers() {
            Picker picker = all(new WeightedRoundRobin(3, Ramp.NONE), 1, 1, 3);
            picker.leave(0);
            // B C C C a cycle; 10 picks end after B in the third cycle's middle: B (3,0), C (2,1).
            assertThat(order(picker, 10)).isEqualTo("BCCCBCCCBC");
            picker.enter(0);
            // A was at (0,0), before C at (2,1); its own weight has no turn 1, so it takes (3,0), before B in the list.
            assertThat(order(picker, 9)).isEqualTo("CCABCCCAB");
        }

        @Test
        void weigh_inTheMiddleOfACycle_neverBursts() {
            Picker picker = all(new WeightedRoundRobin(3, Ramp.NONE), 3, 6, 12);
            order(picker, 10);
            picker.weigh(0, 12_000);
            picker.weigh(1, 6_000);
            picker.weigh(2, 3_000);
            // A (1,0), B (0,4), C (0,3) -> (1,0): B finishes its cycle, then the new order holds.
            assertThat(order(picker, 2 + 42)).isEqualTo("BB" + "ABCABCABCABABABAAAAAA".repeat(2));
        }

        @Test
        void weigh_toZeroAndBack_takesNoTurnMeanwhile() {
            Picker picker = all(new WeightedRoundRobin(2, Ramp.NONE), 1, 1);
            picker.weigh(0, 0);
            assertThat(order(picker, 3)).isEqualTo("BBB");
            picker.weigh(0, 1_000);
            assertThat(order(picker, 4)).isEqualTo("ABAB");
        }

        @Test
        void pick_warmingMember_letsTurnsPassByItsCredit() {
            // A warms at a fixed fraction of 0.4: credit .4 .8 1.2(.2) .6 1.0(0): turns 3 and 5 of each five are
            // served.
            Ramp ramp = (member, now) -> member == 0 ? 400_000_000 : Ramp.FULL;
            Picker picker = all(new WeightedRoundRobin(2, ramp), 1, 1);
            assertThat(order(picker, 14)).isEqualTo("BB" + "ABBAB" + "BBABBAB");
        }
    }

    @Nested
    class OfStride extends TurnsContract {
        @Override
        Picker picker(int members, Ramp ramp) {
            return new Stride(members);
        }

        @Test
        void pick_threeTwoOne_isTheThesisOrder() {
            Picker picker = all(new Stride(3), 3, 2, 1);
            assertThat(order(picker, 12)).isEqualTo("ABAABCABAABC");
        }

        @Test
        void leave_inMidStride_keepsWhatRemained() {
            Picker picker = all(new Stride(2), 1, 1);
            assertThat(order(picker, 1)).isEqualTo("A");
            // A's pass is 2, the pool's 1/2: A keeps one and a half strides.
            picker.leave(0);
            assertThat(order(picker, 5)).isEqualTo("BBBBB");
            picker.enter(0);
            assertThat(order(picker, 6)).isEqualTo("BABABA");
        }

        @Test
        void weigh_keepsTheStridesThatRemain() {
            Picker picker = all(new Stride(2), 1, 1);
            order(picker, 200);
            picker.weigh(0, 3_000);
            int[] served = PickerContract.serve(picker, 400, 2);
            assertThat(served[0]).isBetween(299, 301);
        }
    }

    @Nested
    class OfLeastConnections extends TurnsContract {
        @Override
        Picker picker(int members, Ramp ramp) {
            return new LeastConnections(members);
        }

        @Test
        void pick_fewestInFlightOverWeight_ties_inRotation() {
            Picker picker = all(new LeastConnections(3), 1, 2, 1);
            picker.began(0, 1, 0);
            picker.began(1, 2, 0);
            picker.began(2, 1, 0);
            // All at 1.0: rotation.
            assertThat(order(picker, 4)).isEqualTo("ABCA");
            picker.began(1, 1, 0);
            assertThat(order(picker, 2)).isEqualTo("BB");
            picker.began(2, 0, 0);
            assertThat(order(picker, 2)).isEqualTo("CC");
        }
    }

    @Nested
    class OfHostTurns extends TurnsContract {
        @Override
        Picker picker(int members, Ramp ramp) {
            int[] weights = new int[members];
            int[] hostOf = new int[members];
            for (int member = 0; member < members; member++) {
                weights[member] = 1;
                hostOf[member] = member;
            }
            return new HostTurns(new HostPlaces(weights), hostOf, ramp);
        }

        @Test
        void pick_twoPoolsOnSharedHosts_totalsHoldTheHostsWeights() {
            // Hosts 9, 15, 24; one pool on all three, one on the last two; picks alternate by a fixed irregular
            // pattern.
            HostPlaces places = new HostPlaces(new int[] {9, 15, 24});
            Picker wide = all(new HostTurns(places, new int[] {0, 1, 2}, Ramp.NONE), 2, 7, 5);
            Picker narrow = all(new HostTurns(places, new int[] {1, 2}, Ramp.NONE), 1, 1);
            int[] hosts = new int[3];
            int[] widePool = new int[3];
            long pattern = 0x9E3779B97F4A7C15L;
            for (int i = 0; i < 48 * 200; i++) {
                pattern = pattern * 6364136223846793005L + 1442695040888963407L;
                boolean toWide = pattern < 0;
                int member = toWide ? wide.pick(0, 1, 0, NONE, 0, 0) : narrow.pick(0, 1, 0, NONE, 0, 0);
                int host = toWide ? member : member + 1;
                hosts[host]++;
                if (toWide) {
                    widePool[host]++;
                }
            }
            // 200 cycles of 48; two pools drawn at random leave a remainder of a few turns at the end.
            assertThat(hosts[0]).isBetween(200 * 9 - 12, 200 * 9 + 12);
            assertThat(hosts[1]).isBetween(200 * 15 - 12, 200 * 15 + 12);
            assertThat(hosts[2]).isBetween(200 * 24 - 12, 200 * 24 + 12);
            // The pool's own shares are another matter: the host that only it uses gets far more than 9/48 of it.
            assertThat(widePool[0]).isGreaterThan(widePool[1]);
        }

        @Test
        void pick_withinAHost_followsTheMembersWeights() {
            HostPlaces places = new HostPlaces(new int[] {1, 1});
            Picker picker = all(new HostTurns(places, new int[] {0, 0, 1}, Ramp.NONE), 2, 1, 1);
            assertThat(order(picker, 12)).isEqualTo("ACBCACACBCAC");
        }

        @Test
        void weigh_hostAtZero_takesNoWork() {
            HostPlaces places = new HostPlaces(new int[] {1, 1});
            Picker picker = all(new HostTurns(places, new int[] {0, 1}, Ramp.NONE), 1, 1);
            places.weigh(0, 0);
            assertThat(order(picker, 4)).isEqualTo("BBBB");
            places.weigh(0, 2);
            assertThat(PickerContract.serve(picker, 30, 2)).containsExactly(20, 10);
        }

        @Test
        void pick_onlyMemberOfAHostWarms_theHostsTurnPasses() {
            Ramp ramp = (member, now) -> member == 0 ? 500_000_000 : Ramp.FULL;
            HostPlaces places = new HostPlaces(new int[] {1, 1});
            Picker picker = all(new HostTurns(places, new int[] {0, 1}, ramp), 1, 1);
            assertThat(order(picker, 9)).isEqualTo("BABBABBAB");
        }
    }

    private static Picker all(Picker picker, int... weights) {
        for (int member = 0; member < weights.length; member++) {
            picker.weigh(member, (long) weights[member] * Picker.MILLI);
            picker.enter(member);
        }
        return picker;
    }

    private static String order(Picker picker, int picks) {
        StringBuilder order = new StringBuilder();
        for (int i = 0; i < picks; i++) {
            order.append((char) ('A' + picker.pick(0, 1, 0, NONE, 0, 0)));
        }
        return order.toString();
    }
}
