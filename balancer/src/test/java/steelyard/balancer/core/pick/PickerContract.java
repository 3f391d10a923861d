package steelyard.balancer.core.pick;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.Random;
import org.junit.jupiter.api.Test;

/** What every method owes, whatever it picks. */
abstract class PickerContract {
    private static final int[] NONE = {};

    /** A picker for that many members, all of weight 1, nobody pickable yet. */
    abstract Picker picker(int members, Ramp ramp);

    final Picker full(int members) {
        Picker picker = picker(members, Ramp.NONE);
        for (int member = 0; member < members; member++) {
            picker.weigh(member, Picker.MILLI);
            picker.enter(member);
        }
        return picker;
    }

    @Test
    void pick_nobodyPickable_saysNobody() {
        assertThat(picker(3, Ramp.NONE).pick(0, 1, 0, NONE, 0, 0)).isEqualTo(Picker.NOBODY);
    }

    @Test
    void pick_onePickable_isAlwaysThatOne() {
        Picker picker = picker(5, Ramp.NONE);
        picker.enter(3);

        for (int i = 0; i < 20; i++) {
            assertThat(picker.pick(i, 1, Keys.of(i), NONE, 0, i)).isEqualTo(3);
        }
    }

    @Test
    void pick_equalMembers_areAllServed() {
        assertThat(serve(full(7), 7 * 30, 7)).doesNotContain(0);
    }

    @Test
    void block_member_isPassedOverUntilItEnters() {
        Picker picker = full(3);
        picker.block(1);
        assertThat(serve(picker, 30, 3)[1]).isZero();
        picker.enter(1);
        picker.block(1);
        assertThat(serve(picker, 30, 3)[1]).isZero();
        picker.enter(1);
        assertThat(serve(picker, 60, 3)).doesNotContain(0);
        picker.block(1);
        picker.leave(1);
        picker.enter(1);
        assertThat(serve(picker, 60, 3)).doesNotContain(0);
    }

    @Test
    void block_everybody_leavesNobody() {
        Picker picker = full(2);
        picker.block(0);
        picker.block(1);
        assertThat(picker.pick(1, 1, Keys.of(1), NONE, 0, 0)).isEqualTo(Picker.NOBODY);
    }

    @Test
    void enter_afterALeave_isServedAgain() {
        Picker picker = full(3);
        picker.enter(1);
        picker.leave(0);
        picker.leave(0);
        picker.enter(0);

        assertThat(serve(picker, 60, 3)).doesNotContain(0);
    }

    /** Live and virtual stage are told the same and have to agree. */
    @Test
    void pick_toldTheSame_saysTheSame() {
        Picker picker = full(7);
        Picker other = full(7);
        for (int i = 0; i < 200; i++) {
            int picked = picker.pick(i, 1, Keys.of(i), NONE, 0, i);
            assertThat(other.pick(i, 1, Keys.of(i), NONE, 0, i)).isEqualTo(picked);
            picker.began(picked, 1, i);
            other.began(picked, 1, i);
            picker.ended(picked, 0, true, i + 1);
            other.ended(picked, 0, true, i + 1);
        }
    }

    @Test
    void pick_memberLeft_isNeverPicked() {
        Picker picker = full(4);
        serve(picker, 10, 4);
        picker.leave(2);

        assertThat(serve(picker, 40, 4)[2]).isZero();
    }

    @Test
    void pick_triedMembers_areLeftOutOfThisPickOnly() {
        Picker picker = full(3);
        for (int i = 0; i < 10; i++) {
            assertThat(picker.pick(i, 2, Keys.of(i), new int[] {0, 2}, 2, 0)).isEqualTo(1);
        }
        assertThat(picker.pick(0, 1, 0, new int[] {0, 1, 2}, 3, 0)).isEqualTo(Picker.NOBODY);

        int[] served = serve(picker, 60, 3);
        assertThat(served[0]).isPositive();
        assertThat(served[2]).isPositive();
    }

    @Test
    void pick_triedMemberThatIsNotPickable_staysOut() {
        Picker picker = full(3);
        picker.leave(0);
        picker.pick(0, 1, 0, new int[] {0}, 1, 0);

        assertThat(serve(picker, 30, 3)[0]).isZero();
    }

    /** Random orders of every call: only pickable members are picked, and somebody is whenever one may be. */
    @Test
    void pick_randomCalls_neverPicksWhoMayNotBe() {
        Random random = new Random(5);
        int members = 9;
        Picker picker = full(members);
        boolean[] in = new boolean[members];
        Arrays.fill(in, true);
        for (int call = 0; call < 5_000; call++) {
            int member = random.nextInt(members);
            switch (random.nextInt(6)) {
                case 0 -> {
                    picker.leave(member);
                    in[member] = false;
                }
                case 1 -> {
                    picker.enter(member);
                    in[member] = true;
                }
                case 2 -> picker.weigh(member, (1 + random.nextInt(5)) * (long) Picker.MILLI);
                case 3 -> picker.began(member, 1 + random.nextInt(6), call);
                case 4 -> picker.ended(member, random.nextInt(6), random.nextBoolean(), call);
                default -> {
                    int[] tried = {random.nextInt(members)};
                    int picked = picker.pick(call, 2, Keys.of(call), tried, 1, call);
                    boolean any = false;
                    for (int each = 0; each < members; each++) {
                        any |= in[each] && each != tried[0];
                    }
                    assertThat(picked != Picker.NOBODY).isEqualTo(any);
                    assertThat(picked == Picker.NOBODY || (in[picked] && picked != tried[0]))
                            .isTrue();
                }
            }
        }
    }

    /** Serves that many, one after the other. */
    static int[] serve(Picker picker, int picks, int members) {
        int[] served = new int[members];
        for (int i = 0; i < picks; i++) {
            int picked = picker.pick(i, 1, Keys.of(i), NONE, 0, i);
            picker.began(picked, 1, i);
            picker.ended(picked, 0, true, i);
            served[picked]++;
        }
        return served;
    }
}
