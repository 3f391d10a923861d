package steelyard.balancer.core.pick;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;

/** What methods owe that serve in some order, whatever is drawn: equal members get the same number of turns. */
abstract class TurnsContract extends PickerContract {
    @Test
    void pick_equalMembers_areServedEqually() {
        Picker picker = full(7);
        int[] served = serve(picker, 7 * 30, 7);

        assertThat(served).containsOnly(30);
    }

    @Test
    void pick_memberReturned_doesNotCatchUpInABurst() {
        Picker picker = full(4);
        serve(picker, 12, 4);
        picker.leave(1);
        serve(picker, 300, 4);
        picker.enter(1);

        assertThat(serve(picker, 40, 4)[1]).isBetween(9, 11);
    }

    @Test
    void pick_leaveAndEnterTwice_isHarmless() {
        Picker picker = full(3);
        picker.enter(1);
        picker.leave(0);
        picker.leave(0);
        picker.enter(0);

        assertThat(serve(picker, 30, 3)).containsOnly(10);
    }
}
