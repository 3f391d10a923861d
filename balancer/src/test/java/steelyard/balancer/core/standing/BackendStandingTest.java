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
import steelyard.balancer.settings.ProbeSettings;
import steelyard.balancer.settings.WarmUpSettings;

/** The standing machine: every shown state with every event, then what the ramp does. */
class BackendStandingTest {
    private static final long ORIGIN = Long.MAX_VALUE - 500;
    private static final WarmUpSettings RAMP = new WarmUpSettings(1_000, 0.1);

    /** What can happen to a backend. PASS and MISS reach their limit at once. */
    enum Event {
        PASS,
        MISS,
        RAMP_FULL,
        DRAIN,
        LIMIT,
        ADMIT,
        WITHDRAW
    }

    /**
     * The table: from a state, each event leads to the state named, or changes nothing (-). DRAINING and WITHDRAWN come
     * in two kinds, since a backend that people took out still has its probes' verdict (d: down).
     */
    @ParameterizedTest
    @CsvSource({
        // state      PASS       MISS       RAMP_FULL  DRAIN      LIMIT      ADMIT      WITHDRAW
        "UP,          UP,        DOWN,      UP,        DRAINING,  UP,        UP,        WITHDRAWN",
        "WARMING,     WARMING,   DOWN,      UP,        DRAINING,  WARMING,   WARMING,   WITHDRAWN",
        "DOWN,        WARMING,   DOWN,      DOWN,      DRAINING,  DOWN,      DOWN,      WITHDRAWN",
        "DRAINING,    DRAINING,  DRAINING,  DRAINING,  DRAINING,  DRAINING,  WARMING,   WITHDRAWN",
        "DRAINING_d,  DRAINING,  DRAINING,  DRAINING,  DRAINING,  DRAINING,  DOWN,      WITHDRAWN",
        "WITHDRAWN,   WITHDRAWN, WITHDRAWN, WITHDRAWN, WITHDRAWN, WITHDRAWN, WARMING,   WITHDRAWN",
        "WITHDRAWN_d, WITHDRAWN, WITHDRAWN, WITHDRAWN, WITHDRAWN, WITHDRAWN, DOWN,      WITHDRAWN",
    })
    void event_inEveryState_leadsWhereTheTableSays(
            String state,
            Standing pass,
            Standing miss,
            Standing rampFull,
            Standing drain,
            Standing limit,
            Standing admit,
            Standing withdraw) {
        Map<Event, Standing> expected = new EnumMap<>(Event.class);
        expected.put(Event.PASS, pass);
        expected.put(Event.MISS, miss);
        expected.put(Event.RAMP_FULL, rampFull);
        expected.put(Event.DRAIN, drain);
        expected.put(Event.LIMIT, limit);
        expected.put(Event.ADMIT, admit);
        expected.put(Event.WITHDRAW, withdraw);
        for (Event event : Event.values()) {
            Bench bench = new Bench();
            bench.reach(state);
            Standing from = bench.standing.shown();
            @Nullable Transition change = bench.happen(event);

            assertThat(bench.standing.shown()).as("%s after %s", state, event).isEqualTo(expected.get(event));
            if (from == expected.get(event)) {
                assertThat(change).as("%s after %s", state, event).isNull();
            } else {
                assertThat(change).isEqualTo(new Transition(4, from, expected.get(event), cause(event), bench.now));
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
        Bench bench = new Bench();
        bench.standing.drain(100, bench.now);

        assertThat(bench.standing.cuts(bench.now + 99)).isFalse();
        assertThat(bench.standing.cuts(bench.now + 100)).isTrue();
        assertThat(bench.standing.cuts(bench.now + 101)).isFalse();
    }

    @Test
    void cuts_drainOrderedAgain_countsFromTheNewOrder() {
        Bench bench = new Bench();
        bench.standing.drain(100, bench.now);
        bench.standing.drain(100, bench.now + 60);

        assertThat(bench.standing.cuts(bench.now + 100)).isFalse();
        assertThat(bench.standing.cuts(bench.now + 160)).isTrue();
    }

    @Test
    void cuts_admittedBeforeTheLimit_never() {
        Bench bench = new Bench();
        bench.standing.drain(100, bench.now);
        bench.standing.admit(bench.now + 50);

        assertThat(bench.standing.cuts(bench.now + 100)).isFalse();
    }

    @Test
    void rampFraction_afterAReturn_isTheGreaterOfFloorAndTime() {
        Bench bench = new Bench();
        bench.standing.withdraw(bench.now);
        bench.standing.admit(bench.now);

        assertThat(bench.standing.rampFraction(bench.now)).isEqualTo(Ramp.FULL / 10);
        assertThat(bench.standing.rampFraction(bench.now + 99)).isEqualTo(Ramp.FULL / 10);
        assertThat(bench.standing.rampFraction(bench.now + 500)).isEqualTo(Ramp.FULL / 2);
        assertThat(bench.standing.rampFraction(bench.now + 1_000)).isEqualTo(Ramp.FULL);
    }

    @Test
    void rampFraction_awayAgainDuringTheRamp_beginsAnew() {
        Bench bench = new Bench();
        bench.reach("WARMING");
        bench.now += 700;
        bench.happen(Event.MISS);
        bench.happen(Event.PASS);

        assertThat(bench.standing.rampFraction(bench.now)).isEqualTo(Ramp.FULL / 10);
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
            case RAMP_FULL -> Cause.WARMED;
            case DRAIN -> Cause.DRAIN;
            case ADMIT -> Cause.ADMIT;
            case WITHDRAW -> Cause.WITHDRAW;
            case LIMIT -> throw new AssertionError("a limit changes no word");
        };
    }

    /** A backend with a ramp of 1000, probes of one miss and one pass every 10 within 5, at a clock near its end. */
    private static final class Bench {
        final BackendStanding standing = new BackendStanding(
                4,
                new ProbeTracker(new ProbeSettings(null, 10, 5, 1, 1), true, ORIGIN, probe -> 0.5),
                true,
                RAMP,
                null);
        long now = ORIGIN;

        void reach(String state) {
            boolean down = state.endsWith("_d") || state.equals("DOWN");
            if (down || state.equals("WARMING")) {
                happen(Event.MISS);
            }
            if (state.equals("WARMING")) {
                happen(Event.PASS);
            }
            if (state.startsWith("DRAINING")) {
                happen(Event.DRAIN);
            }
            if (state.startsWith("WITHDRAWN")) {
                happen(Event.WITHDRAW);
            }
            assertThat(standing.shown().name()).isEqualTo(state.replace("_d", ""));
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
