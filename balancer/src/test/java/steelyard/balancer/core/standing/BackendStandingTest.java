package steelyard.balancer.core.standing;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.EnumMap;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.EnumSource;
import steelyard.balancer.core.pick.Ramp;
import steelyard.balancer.core.standing.Transition.Cause;
import steelyard.balancer.settings.BenchSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.balancer.settings.WarmUpSettings;

/** The standing machine: every shown state with every event, then what the ramp does. */
class BackendStandingTest {
    private static final long ORIGIN = Long.MAX_VALUE - 500;
    private static final BenchSettings BENCH = new BenchSettings(1, 0, 10, 1, 5_000, 5_000, 1, 1);
    private static final WarmUpSettings RAMP = new WarmUpSettings(1_000, 0.1);

    /** What can happen to a backend. PASS and MISS reach their limit at once. */
    enum Event {
        PASS,
        MISS,
        RAMP_FULL,
        DRAIN,
        LIMIT,
        ADMIT,
        WITHDRAW,
        FAIL,
        BENCH_OVER
    }

    /**
     * The table: from a state, each event leads to the state named. DOWN, DRAINING and WITHDRAWN come in kinds, since a
     * backend that people took out still has its probes' verdict (d: down), and any of them may be benched (b). One failure
     * benches.
     */
    @ParameterizedTest
    @CsvSource({
        // state      PASS       MISS       RAMP_FULL  DRAIN     LIMIT      ADMIT      WITHDRAW   FAIL       BENCH_OVER
        "UP,          UP,        DOWN,      UP,        DRAINING, UP,        UP,        WITHDRAWN, BENCHED,   UP",
        "WARMING,     WARMING,   DOWN,      UP,        DRAINING, WARMING,   WARMING,   WITHDRAWN, BENCHED,   WARMING",
        "BENCHED,     BENCHED,   DOWN,      BENCHED,   DRAINING, BENCHED,   BENCHED,   WITHDRAWN, BENCHED,   WARMING",
        "DOWN,        WARMING,   DOWN,      DOWN,      DRAINING, DOWN,      DOWN,      WITHDRAWN, DOWN,      DOWN",
        "DOWN_b,      BENCHED,   DOWN,      DOWN,      DRAINING, DOWN,      DOWN,      WITHDRAWN, DOWN,      DOWN",
        "DRAINING,    DRAINING,  DRAINING,  DRAINING,  DRAINING, DRAINING,  WARMING,   WITHDRAWN, DRAINING,  DRAINING",
        "DRAINING_b,  DRAINING,  DRAINING,  DRAINING,  DRAINING, DRAINING,  BENCHED,   WITHDRAWN, DRAINING,  DRAINING",
        "DRAINING_d,  DRAINING,  DRAINING,  DRAINING,  DRAINING, DRAINING,  DOWN,      WITHDRAWN, DRAINING,  DRAINING",
        "WITHDRAWN,   WITHDRAWN, WITHDRAWN, WITHDRAWN, WITHDRAWN, WITHDRAWN, WARMING,  WITHDRAWN, WITHDRAWN, WITHDRAWN",
        "WITHDRAWN_b, WITHDRAWN, WITHDRAWN, WITHDRAWN, WITHDRAWN, WITHDRAWN, BENCHED,  WITHDRAWN, WITHDRAWN, WITHDRAWN",
        "WITHDRAWN_d, WITHDRAWN, WITHDRAWN, WITHDRAWN, WITHDRAWN, WITHDRAWN, DOWN,     WITHDRAWN, WITHDRAWN, WITHDRAWN",
    })
    void event_inEveryState_leadsWhereTheTableSays(
            String state,
            Standing pass,
            Standing miss,
            Standing rampFull,
            Standing drain,
            Standing limit,
            Standing admit,
            Standing withdraw,
            Standing fail,
            Standing benchOver) {
        Map<Event, Standing> expected = new EnumMap<>(Event.class);
        expected.put(Event.PASS, pass);
        expected.put(Event.MISS, miss);
        expected.put(Event.RAMP_FULL, rampFull);
        expected.put(Event.DRAIN, drain);
        expected.put(Event.LIMIT, limit);
        expected.put(Event.ADMIT, admit);
        expected.put(Event.WITHDRAW, withdraw);
        expected.put(Event.FAIL, fail);
        expected.put(Event.BENCH_OVER, benchOver);
        for (Event event : Event.values()) {
            Rig rig = new Rig();
            rig.reach(state);
            Standing from = rig.standing.shown();
            @Nullable Transition change = rig.happen(event);

            assertThat(rig.standing.shown()).as("%s after %s", state, event).isEqualTo(expected.get(event));
            if (from == expected.get(event)) {
                assertThat(change).as("%s after %s", state, event).isNull();
            } else {
                assertThat(change).isEqualTo(new Transition(4, from, expected.get(event), cause(event), rig.now));
            }
        }
    }

    @ParameterizedTest
    @EnumSource(Standing.class)
    void pickable_ofEveryWord_isUpAndWarmingOnly(Standing standing) {
        assertThat(standing.pickable()).isEqualTo(standing == Standing.UP || standing == Standing.WARMING);
    }

    @Test
    void cuts_atTheLimit_saysSoOnce() {
        Rig rig = new Rig();
        rig.standing.drain(100, rig.now);

        assertThat(rig.standing.cuts(rig.now + 99)).isFalse();
        assertThat(rig.standing.cuts(rig.now + 100)).isTrue();
        assertThat(rig.standing.cuts(rig.now + 101)).isFalse();
    }

    @Test
    void cuts_drainOrderedAgain_countsFromTheNewOrder() {
        Rig rig = new Rig();
        rig.standing.drain(100, rig.now);
        rig.standing.drain(100, rig.now + 60);

        assertThat(rig.standing.cuts(rig.now + 100)).isFalse();
        assertThat(rig.standing.cuts(rig.now + 160)).isTrue();
    }

    @Test
    void cuts_admittedBeforeTheLimit_never() {
        Rig rig = new Rig();
        rig.standing.drain(100, rig.now);
        rig.standing.admit(rig.now + 50);

        assertThat(rig.standing.cuts(rig.now + 100)).isFalse();
    }

    @Test
    void rampFraction_afterAReturn_isTheGreaterOfFloorAndTime() {
        Rig rig = new Rig();
        rig.standing.withdraw(rig.now);
        rig.standing.admit(rig.now);

        assertThat(rig.standing.rampFraction(rig.now)).isEqualTo(Ramp.FULL / 10);
        assertThat(rig.standing.rampFraction(rig.now + 99)).isEqualTo(Ramp.FULL / 10);
        assertThat(rig.standing.rampFraction(rig.now + 500)).isEqualTo(Ramp.FULL / 2);
        assertThat(rig.standing.rampFraction(rig.now + 1_000)).isEqualTo(Ramp.FULL);
    }

    @Test
    void rampFraction_awayAgainDuringTheRamp_beginsAnew() {
        Rig rig = new Rig();
        rig.reach("WARMING");
        rig.now += 700;
        rig.happen(Event.MISS);
        rig.happen(Event.PASS);

        assertThat(rig.standing.rampFraction(rig.now)).isEqualTo(Ramp.FULL / 10);
    }

    @Test
    void shown_withoutWarmUp_returnsAsUp() {
        BackendStanding standing = new BackendStanding(0, null, true, null, null);
        standing.withdraw(0);
        standing.admit(0);

        assertThat(standing.shown()).isEqualTo(Standing.UP);
        assertThat(standing.hasDeadline()).isFalse();
    }

    private static Cause cause(Event event) {
        return switch (event) {
            case PASS -> Cause.PASSES;
            case MISS -> Cause.MISSES;
            case RAMP_FULL -> Cause.RAMPED;
            case DRAIN -> Cause.DRAIN;
            case ADMIT -> Cause.ADMIT;
            case WITHDRAW -> Cause.WITHDRAW;
            case FAIL -> Cause.FAILURES;
            case BENCH_OVER -> Cause.FREED;
            case LIMIT -> throw new AssertionError("a limit changes no word");
        };
    }

    /** A backend with a ramp of 1000, probes of one miss and one pass every 10 within 5, at a clock near its end. */
    private static final class Rig {
        final BackendStanding standing = new BackendStanding(
                4,
                new ProbeTracker(new ProbeSettings(null, 10, 5, 1, 1), true, ORIGIN, probe -> 0.5),
                true,
                RAMP,
                BENCH);
        long now = ORIGIN;

        void reach(String state) {
            boolean down = state.endsWith("_d") || state.equals("DOWN");
            if (down || state.equals("WARMING")) {
                happen(Event.MISS);
            }
            if (state.equals("WARMING")) {
                happen(Event.PASS);
            }
            if (state.endsWith("_b") || state.equals("BENCHED")) {
                happen(Event.FAIL);
            }
            if (state.equals("DOWN_b")) {
                happen(Event.MISS);
            }
            if (state.startsWith("DRAINING")) {
                happen(Event.DRAIN);
            }
            if (state.startsWith("WITHDRAWN")) {
                happen(Event.WITHDRAW);
            }
            assertThat(standing.shown().name()).isEqualTo(state.replaceFirst("_.", ""));
        }

        @Nullable
        Transition happen(Event event) {
            return switch (event) {
                case PASS -> probe(true);
                case MISS -> probe(false);
                case RAMP_FULL -> {
                    now += 1_000;
                    yield standing.pollRamp(now);
                }
                case DRAIN -> standing.drain(100, now);
                case LIMIT -> {
                    now += 100;
                    standing.cuts(now);
                    yield null;
                }
                case ADMIT -> standing.admit(now);
                case FAIL -> standing.ended(true, () -> true, now);
                case BENCH_OVER -> {
                    now += 5_000;
                    yield standing.pollBench(now);
                }
                case WITHDRAW -> standing.withdraw(now);
            };
        }

        private @Nullable Transition probe(boolean good) {
            ProbeTracker probes = java.util.Objects.requireNonNull(standing.probes());
            now = probes.deadlineNanos();
            assertThat(standing.pollProbes(now)).isEqualTo(ProbeTracker.Step.START);
            Standing before = standing.shown();
            probes.answered(probes.number(), good, now);
            return standing.afterProbe(before, now);
        }
    }
}
