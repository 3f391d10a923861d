package steelyard.balancer.core.standing;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.balancer.core.standing.ProbeTracker.Step;
import steelyard.balancer.settings.ProbeSettings;

/** Edge cases of probing, from several clock origins; one unit of time here is a nanosecond. */
class ProbeTrackerTest {
    private static final ProbeSettings EVERY_100_WITHIN_40 = settings(100, 40, 3, 2);

    @ParameterizedTest
    @ValueSource(longs = {0, -1, -50, Long.MAX_VALUE, Long.MAX_VALUE - 130, Long.MIN_VALUE, 1_000_000_007})
    void poll_overThePeriod_startsDropsAndStartsAgain(long origin) {
        ProbeTracker probes = new ProbeTracker(EVERY_100_WITHIN_40, true, origin + 30, probe -> 0.5);

        assertThat(probes.deadlineNanos()).isEqualTo(origin + 30);
        assertThat(probes.poll(origin + 29)).isEqualTo(Step.NOTHING);
        assertThat(probes.poll(origin + 30)).isEqualTo(Step.START);
        assertThat(probes.number()).isZero();
        assertThat(probes.poll(origin + 30)).isEqualTo(Step.NOTHING);
        assertThat(probes.deadlineNanos()).isEqualTo(origin + 70);
        assertThat(probes.poll(origin + 69)).isEqualTo(Step.NOTHING);
        assertThat(probes.poll(origin + 70)).isEqualTo(Step.DROP);
        assertThat(probes.deadlineNanos()).isEqualTo(origin + 130);
        assertThat(probes.poll(origin + 130)).isEqualTo(Step.START);
        assertThat(probes.number()).isEqualTo(1);
    }

    @ParameterizedTest
    @ValueSource(longs = {0, Long.MAX_VALUE - 20, -3})
    void answered_atTheLimitOrAfter_isAMiss(long origin) {
        ProbeTracker early = started(origin, settings(100, 40, 1, 1));
        assertThat(early.answered(0, true, origin + 39)).isTrue();
        assertThat(early.up()).isTrue();

        ProbeTracker exact = started(origin, settings(100, 40, 1, 1));
        assertThat(exact.answered(0, true, origin + 40)).isTrue();
        assertThat(exact.up()).isFalse();

        ProbeTracker late = started(origin, settings(100, 40, 1, 1));
        assertThat(late.poll(origin + 41)).isEqualTo(Step.DROP);
        assertThat(late.answered(0, true, origin + 42)).isFalse();
        assertThat(late.up()).isFalse();
    }

    @ParameterizedTest
    @ValueSource(longs = {0, Long.MAX_VALUE - 1_000})
    void answered_flapAtExactlyTheLimit_changesOnTheLastOfTheRunOnly(long origin) {
        Play play = new Play(origin, EVERY_100_WITHIN_40);
        play.probes("MMPMMPMM");
        assertThat(play.up()).isTrue();
        play.probes("M");
        assertThat(play.up()).isFalse();
        play.probes("PMPMP");
        assertThat(play.up()).isFalse();
        play.probes("P");
        assertThat(play.up()).isTrue();
    }

    @ParameterizedTest
    @ValueSource(longs = {0, Long.MAX_VALUE - 250})
    void poll_withinLongerThanEvery_neverRunsTwoAtOnce(long origin) {
        ProbeTracker probes = started(origin, settings(100, 250, 3, 2));
        assertThat(probes.poll(origin + 100)).isEqualTo(Step.NOTHING);
        assertThat(probes.poll(origin + 250)).isEqualTo(Step.DROP);
        assertThat(probes.poll(origin + 250)).isEqualTo(Step.START);
    }

    @ParameterizedTest
    @ValueSource(longs = {0, Long.MAX_VALUE - 130})
    void retune_betweenProbes_keepsTheRunAndCountsFromTheLastStart(long origin) {
        Play play = new Play(origin, EVERY_100_WITHIN_40);
        play.probes("MM");
        play.probes.retune(settings(50, 40, 3, 2), play.now);
        assertThat(play.probes.deadlineNanos()).isEqualTo(play.lastStart + 50);
        play.probes("M");
        assertThat(play.up()).isFalse();
    }

    @ParameterizedTest
    @ValueSource(longs = {0, -7})
    void retune_limitBelowTheRunSoFar_changesWithTheNextMiss(long origin) {
        Play play = new Play(origin, settings(100, 40, 5, 2));
        play.probes("MMM");
        play.probes.retune(settings(100, 40, 2, 2), play.now);
        assertThat(play.up()).isTrue();
        play.probes("M");
        assertThat(play.up()).isFalse();
    }

    @ParameterizedTest
    @ValueSource(longs = {0, -7})
    void retune_whileAProbeRuns_movesItsLimit(long origin) {
        ProbeTracker probes = started(origin, settings(100, 40, 1, 1));
        probes.retune(settings(100, 60, 1, 1), origin + 10);
        assertThat(probes.deadlineNanos()).isEqualTo(origin + 60);
        assertThat(probes.answered(0, true, origin + 59)).isTrue();
        assertThat(probes.up()).isTrue();
    }

    private static ProbeTracker started(long at, ProbeSettings settings) {
        ProbeTracker probes = new ProbeTracker(settings, true, at, probe -> 0.5);
        assertThat(probes.poll(at)).isEqualTo(Step.START);
        return probes;
    }

    private static ProbeSettings settings(long every, long within, int misses, int passes) {
        return new ProbeSettings("/afloat", every, within, misses, passes);
    }

    /** Plays probes: P passes at once, M is refused at once. */
    private static final class Play {
        final ProbeTracker probes;
        long now;
        long lastStart;

        Play(long origin, ProbeSettings settings) {
            probes = new ProbeTracker(settings, true, origin, probe -> 0.5);
        }

        void probes(String answers) {
            for (char answer : answers.toCharArray()) {
                now = probes.deadlineNanos();
                lastStart = now;
                assertThat(probes.poll(now)).isEqualTo(Step.START);
                assertThat(probes.answered(probes.number(), answer == 'P', now)).isTrue();
            }
        }

        boolean up() {
            return probes.up();
        }
    }

    /** Draws 0, 1/2 and almost 1 at a jitter of a tenth: periods of 90, 100 and 110. */
    @Test
    void deadline_withJitter_isOffByTheDrawOfTheProbe() {
        double[] draws = {0, 0.5, 1 - 0x1.0p-53};
        ProbeTracker probes =
                new ProbeTracker(new ProbeSettings(null, 100, 40, 3, 2, 0.1), true, 0, probe -> draws[(int) probe]);
        long now = 0;
        for (long period : new long[] {90, 100, 110}) {
            probes.poll(now);
            probes.answered(probes.number(), true, now + 1);
            assertThat(probes.deadlineNanos() - now).isEqualTo(period);
            now = probes.deadlineNanos();
        }
    }
}
