package steelyard.harness.judge;

import java.util.Set;
import java.util.stream.IntStream;
import java.util.stream.LongStream;
import steelyard.balancer.core.standing.Transition;

/**
 * {@code standing-changes}: changes between pickable and not, or of the shown word. Of a target, those of the member
 * with most; of the whole stage, all of them.
 */
final class StandingChanges extends Meter {
    private final Window window;
    private final int[] members;
    private final boolean wholeStage;
    private final boolean shown;
    private final long[] changes;

    /**
     * @param members numbers of the backends looked at
     * @param wholeStage whether they are all, and counted together
     */
    StandingChanges(Window window, int[] members, boolean wholeStage, boolean shown, int backends) {
        this.window = window;
        this.members = members;
        this.wholeStage = wholeStage;
        this.shown = shown;
        changes = new long[backends];
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.STANDINGS);
    }

    @Override
    public void stood(Transition transition) {
        boolean counts =
                shown || transition.from().pickable() != transition.to().pickable();
        if (counts && window.holds(transition.atNanos())) {
            changes[transition.backend()]++;
        }
    }

    @Override
    Reading read() {
        LongStream counts = IntStream.of(members).mapToLong(backend -> changes[backend]);
        return Reading.of(wholeStage ? counts.sum() : counts.max().orElse(0));
    }
}
