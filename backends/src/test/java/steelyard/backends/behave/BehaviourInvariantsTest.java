package steelyard.backends.behave;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.backends.behave.BehaviourSettings.ProbeWork;

/** Random plays with every fault: what must hold whatever happens. Seeded, so a failure can be played again. */
class BehaviourInvariantsTest {

    private static final int STEPS = 4_000;

    /** One thing that happens at an instant; the same list is played with different polling. */
    private record Step(long atNanos, int what, long number) {}

    @ParameterizedTest
    @ValueSource(longs = {1, 2, 3, 4, 5, 6, 7, 8})
    void replies_whateverThePolling_areTheSame(long seed) {
        List<Step> steps = steps(seed, Long.MAX_VALUE - 40_000_000);
        List<String> seldom = play(seed, steps, 0);
        List<String> often = play(seed, steps, 9);
        assertThat(often).isEqualTo(seldom).hasSizeGreaterThan(STEPS / 2);
    }

    @ParameterizedTest
    @ValueSource(longs = {0, Long.MIN_VALUE, Long.MAX_VALUE - 40_000_000})
    void replies_whateverTheOrigin_areTheSame(long origin) {
        assertThat(play(5, steps(5, origin), 2)).isEqualTo(play(5, steps(5, 1_000), 2));
    }

    private static List<Step> steps(long seed, long origin) {
        SplittableRandom random = new SplittableRandom(seed);
        List<Step> steps = new ArrayList<>();
        long at = origin;
        for (int i = 0; i < STEPS; i++) {
            at += random.nextInt(4) == 0 ? 0 : random.nextInt(40_000);
            steps.add(new Step(at, random.nextInt(100), i));
        }
        return steps;
    }

    private static List<String> play(long seed, List<Step> steps, int extraPolls) {
        SplittableRandom polls = new SplittableRandom(99);
        long origin = steps.get(0).atNanos();
        Trace trace = new Trace(origin);
        BehaviourSettings settings = BehaviourSettings.of(
                        (int) (1 + seed % 4),
                        (int) (seed % 7),
                        seed < 5 ? new ServiceTime.Exponential(60_000) : new ServiceTime.Gamma(60_000, 2))
                .withCold(new Cold(3, 500_000))
                .withLoad(new LoadPage(seed % 3 * 20_000, List.of(new Gauge("memory", 0.1, 0.05))))
                .withProbeWork(seed % 2 == 0 ? ProbeWork.FREE : ProbeWork.QUEUED);
        Behaviour behaviour = new Behaviour(0, settings, new Chance(seed), origin);
        int[] places = new int[STEPS];
        long last = origin;
        for (Step step : steps) {
            for (int i = 0; i < extraPolls && step.atNanos() != last; i++) {
                last += polls.nextLong(step.atNanos() - last + 1);
                behaviour.poll(last, trace);
                checkBooks(behaviour.figures(last, trace));
            }
            last = step.atNanos();
            take(step, behaviour, places, trace);
        }
        Figures end = behaviour.figures(last + 1_000_000_000, trace);
        checkBooks(end);
        assertThat(end.inService() + end.waiting()).isZero();
        return trace.lines;
    }

    private static void take(Step step, Behaviour behaviour, int[] places, Trace trace) {
        long at = step.atNanos();
        int number = (int) step.number();
        places[number] = Behaviour.NOWHERE;
        if (step.what() < 80) {
            places[number] = behaviour.arrive(number, number, number % 3, 0, at, trace);
        } else if (step.what() < 88) {
            behaviour.probe(-1 - number, number, at, trace);
        } else if (step.what() < 91) {
            behaviour.read(-1 - number, number, at, trace);
        } else if (step.what() < 95) {
            int earlier = Math.max(0, number - 2);
            behaviour.abandon(places[earlier], earlier, at, trace);
        } else {
            behaviour.apply(change(number), at, trace);
        }
        checkBooks(behaviour.figures(at, trace));
    }

    private static Change change(int number) {
        return switch (number % 14) {
            case 0 -> new Change.Slow(2.5, 1_000, number % 2 == 0);
            case 1 -> new Change.Fail(0.5, 500, Change.When.AT_ONCE, true);
            case 2 -> new Change.Fail(0.5, 503, Change.When.AFTER_WORK, false);
            case 3 -> new Change.Hang();
            case 4 -> new Change.Refuse();
            case 5 -> new Change.Kill();
            case 6 -> new Change.FailProbe();
            case 7 -> new Change.FlapProbe(100_000);
            case 8 -> new Change.Load("memory", 0.5);
            case 9 -> new Change.Fill(0.9);
            case 10, 11 -> new Change.Revive();
            default -> Change.Heal.all();
        };
    }

    /** Every request once, and Little's law on the path, exactly. */
    private static void checkBooks(Figures f) {
        assertThat(f.answered() + f.turnedAway() + f.failed() + f.unanswered() + f.lost() + f.dropped())
                .isEqualTo(f.received() - f.inService() - f.waiting());
        assertThat(f.waitNanos() + f.serviceNanos()).isEqualTo(f.heldIntegralNanos());
        assertThat(f.busyWorkerNanos()).isGreaterThanOrEqualTo(f.serviceNanos());
        assertThat(f.inService()).isBetween(0, f.workers());
        assertThat(f.readingsFailed()).isLessThanOrEqualTo(f.readings());
        assertThat(f.dropped()).isLessThanOrEqualTo(f.abandoned());
    }
}
