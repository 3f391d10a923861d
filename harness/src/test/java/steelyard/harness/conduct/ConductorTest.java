package steelyard.harness.conduct;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayDeque;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.Arguments;
import org.junit.jupiter.params.provider.MethodSource;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Target;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;

class ConductorTest {
    private static final long SECOND = 1_000_000_000L;
    private static final int NO_LIMIT = Integer.MAX_VALUE;

    private final TraceHands hands = new TraceHands();

    static Stream<Arguments> everyKind() {
        return Stream.of(
                Arguments.of(
                        "{slow: fulmar, factor: 3, plus: 20ms}",
                        "change 0 Slow[factor=3.0, plusNanos=20000000, probes=false]"),
                Arguments.of(
                        "{fail: fulmar, share: 20%, status: 503}",
                        "change 0 Fail[share=0.2, status=503, when=AT_ONCE, probes=false]"),
                Arguments.of("{hang: fulmar}", "change 0 Hang[]"),
                Arguments.of("{refuse: fulmar}", "change 0 Refuse[]"),
                Arguments.of("{kill: fulmar}", "change 0 Kill[]"),
                Arguments.of("{revive: fulmar}", "change 0 Revive[]"),
                Arguments.of("{fail-probe: fulmar}", "change 0 FailProbe[]"),
                Arguments.of("{flap-probe: fulmar, period: 2s}", "change 0 FlapProbe[periodNanos=2000000000]"),
                Arguments.of("{load: fulmar, gauge: cpu, to: 90%}", "change 0 Load[gauge=cpu, to=0.9]"),
                Arguments.of("{fill: fulmar, to: 95%}", "change 0 Fill[to=0.95]"),
                Arguments.of("{heal: fulmar}", "change 0 Heal[fault=null]"),
                Arguments.of("{reweigh: gannet, weight: 5}", "reweigh 1 to 5"),
                Arguments.of("{drain: gannet, limit: 3s}", "drain 1 within 3000 ms"),
                Arguments.of("{drain: gannet}", "drain 1 within 0 ms"),
                Arguments.of("{admit: gannet}", "admit 1"),
                Arguments.of("{withdraw: gannet}", "withdraw 1"),
                Arguments.of(
                        "{retune: {pool: seats}, probe: {every: 500ms}}",
                        "retune 0 to ProbeSettings[path=/afloat, everyNanos=500000000, withinNanos=100000000, misses=3,"
                                + " passes=2, jitter=0.0]"),
                Arguments.of(
                        "{retune: {pool: seats}, drain: {limit: 3s}}",
                        "retune 0 to DrainSettings[limitNanos=3000000000, keepsClients=false]"),
                Arguments.of("{retune: {pool: seats}, method: stride}", "retune 0 to STRIDE"));
    }

    @ParameterizedTest
    @MethodSource("everyKind")
    void cue_ofTheFile_isDoneThenTold(String cue, String done) {
        Drill drill = drill("  - " + "{at: 1s, " + cue.substring(1));
        play(conductor(drill), SECOND);
        assertThat(notSent()).containsExactly(done, applied(drill.cues().get(0), 1_000, "DRILL"));
    }

    @ParameterizedTest
    @MethodSource("everyKind")
    void cue_byHand_takesTheSamePath(String text, String done) {
        Drill drill = drill("");
        Conductor conductor = conductor(drill);
        Cue cue = byHand(text, drill);
        conductor.byHand(cue);
        play(conductor, 2 * SECOND);
        assertThat(notSent()).containsExactly(done, applied(cue, 2_000, "HAND"));
    }

    @Test
    void everyKind_isInTheTablesOfThisTest() {
        Drill drill = drill("");
        List<Cue.Kind> seen = everyKind()
                .map(each -> byHand((String) each.get()[0], drill).kind())
                .toList();
        assertThat(Cue.Kind.values()).allMatch(kind -> seen.contains(kind) || kind == Cue.Kind.SURGE);
    }

    @Test
    void group_isDoneMemberByMemberBeforeItIsTold() {
        Drill drill = drill("  - {at: 1s, kill: {pool: seats}}");
        play(conductor(drill), SECOND);
        assertThat(notSent())
                .containsExactly(
                        "change 0 Kill[]",
                        "change 1 Kill[]",
                        applied(drill.cues().get(0), 1_000, "DRILL"));
    }

    @Test
    void reweigh_ofAHostThatWeightsCountBy_setsTheHost() {
        Drill drill = drill("  - {at: 1s, reweigh: {host: quay}, weight: 7}");
        play(conductor(drill), SECOND);
        assertThat(notSent()).startsWith("reweigh host 0 to 7");
    }

    @Test
    void reweigh_ofAHostThatNoPoolCountsBy_setsItsBackends() {
        Drill drill = drill("  - {at: 1s, reweigh: {host: pier}, weight: 7}");
        play(conductor(drill), SECOND);
        assertThat(notSent()).startsWith("reweigh 0 to 7", "reweigh 1 to 7");
    }

    @Test
    void end_ofAFault_healsThatFaultAlone() {
        Drill drill = drill("  - {at: 1s, slow: fulmar, factor: 2, for: 1s}");
        play(conductor(drill), 3 * SECOND);
        assertThat(notSent())
                .endsWith("change 0 Heal[fault=SLOW]", applied(drill.cues().get(0), 2_000, "END"));
    }

    @Test
    void end_ofAKill_revives() {
        Drill drill = drill("  - {at: 1s, kill: fulmar, for: 1s}");
        play(conductor(drill), 3 * SECOND);
        assertThat(notSent()).endsWith("change 0 Revive[]", applied(drill.cues().get(0), 2_000, "END"));
    }

    @Test
    void end_afterALaterFaultOfTheKind_leavesThatInForce() {
        Drill drill = drill("""
                  - {at: 1s, slow: {pool: seats}, factor: 2, for: 2s}
                  - {at: 2s, slow: fulmar, factor: 5}
                """);
        play(conductor(drill), 4 * SECOND);
        assertThat(notSent())
                .endsWith("change 1 Heal[fault=SLOW]", applied(drill.cues().get(0), 3_000, "END"))
                .doesNotContain("change 0 Heal[fault=SLOW]");
    }

    @Test
    void end_afterAHeal_isNoEventAnyMore() {
        Drill drill = drill("  - {at: 1s, hang: fulmar, for: 2s}\n  - {at: 2s, heal: fulmar}");
        play(conductor(drill), 4 * SECOND);
        assertThat(notSent()).endsWith(applied(drill.cues().get(1), 2_000, "DRILL"));
    }

    @Test
    void end_ofAKill_afterAHeal_stillRevives() {
        Drill drill = drill("  - {at: 1s, kill: fulmar, for: 2s}\n  - {at: 2s, heal: fulmar}");
        play(conductor(drill), 4 * SECOND);
        assertThat(notSent()).contains("change 0 Revive[]");
    }

    /** To revive a backend that runs changes nothing, so its fault still has its end to come. */
    @Test
    void end_afterAReviveOfARunningOne_stillHeals() {
        Drill drill = drill("  - {at: 1s, slow: fulmar, factor: 2, for: 2s}\n  - {at: 2s, revive: fulmar}");
        play(conductor(drill), 4 * SECOND);
        assertThat(notSent())
                .endsWith("change 0 Heal[fault=SLOW]", applied(drill.cues().get(0), 3_000, "END"));
    }

    /** A backend that starts again has no fault left. */
    @Test
    void end_afterTheEndOfAKill_isNoEventAnyMore() {
        Drill drill = drill("""
                  - {at: 1s, slow: fulmar, factor: 2, for: 3s}
                  - {at: 2s, kill: fulmar, for: 1s}
                """);
        play(conductor(drill), 5 * SECOND);
        assertThat(notSent()).endsWith("change 0 Revive[]", applied(drill.cues().get(1), 3_000, "END"));
    }

    @Test
    void surge_bendsTheArrivalsFromWhenItWasDue_andEnds() {
        // 10/s with the first at 50 ms; from 1 s to 2 s three times as many; the poll that finds out comes late.
        Drill drill = drill("  - {at: 1s, surge: {pool: seats}, factor: 3, for: 1s}");
        play(conductor(drill), 2_999_000_000L);
        assertThat(hands.dues.stream().filter(due -> due < SECOND)).hasSize(10);
        assertThat(hands.dues.stream().filter(due -> due >= SECOND && due < 2 * SECOND))
                .hasSize(30);
        assertThat(hands.dues.stream().filter(due -> due >= 2 * SECOND)).hasSize(10);
        assertThat(notSent())
                .containsExactly(
                        applied(drill.cues().get(0), 1_000, "DRILL"),
                        applied(drill.cues().get(0), 2_000, "END"));
    }

    @Test
    void poll_isInOrderOfTime_cuesBeforeRequestsOfTheirInstant() {
        Drill drill = drill("  - {at: 150ms, kill: fulmar}");
        play(conductor(drill), SECOND / 4);
        assertThat(hands.trace)
                .containsExactly(
                        "send 0 at 50 ms",
                        "change 0 Kill[]",
                        applied(drill.cues().get(0), 150, "DRILL"),
                        "send 1 at 150 ms",
                        "send 2 at 250 ms");
    }

    @Test
    void poll_withALimit_doesNoMoreAndGoesOnNextTime() {
        Conductor conductor = conductor(drill(""));
        conductor.poll(SECOND, hands, 3);
        assertThat(hands.dues).hasSize(3);
        assertThat(conductor.nextNanos()).isEqualTo(350_000_000L);
        conductor.poll(SECOND, hands, NO_LIMIT);
        assertThat(hands.dues).hasSize(10);
    }

    @Test
    void nextNanos_withACueByHand_isNow() {
        Drill drill = drill("");
        Conductor conductor = conductor(drill);
        conductor.poll(SECOND, hands, NO_LIMIT);
        conductor.byHand(byHand("{kill: fulmar}", drill));
        assertThat(conductor.nextNanos()).isEqualTo(SECOND);
    }

    @Test
    void hasNext_untilThePlayIsOver_evenWithoutTraffic() {
        Conductor conductor = conductor(drill(""));
        conductor.poll(10 * SECOND - 1, hands, NO_LIMIT);
        assertThat(conductor.hasNext()).isTrue();
        assertThat(conductor.nextNanos()).isEqualTo(10 * SECOND);
        conductor.poll(10 * SECOND, hands, NO_LIMIT);
        assertThat(conductor.hasNext()).isFalse();
        assertThat(hands.dues).hasSize(100);
    }

    @Test
    void byHand_onAnUnknownBackend_isRefusedAndNothingHappens() {
        Conductor conductor = conductor(drill(""));
        Target unknown = new Target(Target.Kind.BACKENDS, "albatross", List.of("albatross"));
        Cue cue = new Cue("x", 0, Cue.Kind.KILL, unknown, Cue.Settings.NONE, 0);
        assertThatThrownBy(() -> conductor.byHand(cue))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("albatross");
        play(conductor, SECOND);
        assertThat(notSent()).isEmpty();
    }

    private void play(Conductor conductor, long upToNanos) {
        conductor.poll(upToNanos, hands, NO_LIMIT);
    }

    private List<String> notSent() {
        return hands.trace.stream().filter(each -> !each.startsWith("send")).toList();
    }

    private static String applied(Cue cue, long dueMillis, String by) {
        return "applied " + cue.text() + ", due " + dueMillis + " ms, " + by;
    }

    private static Conductor conductor(Drill drill) {
        return new Conductor(drill, new Chance(7), new ArrayDeque<>());
    }

    private static Cue byHand(String text, Drill drill) {
        return value(DrillReader.readCue(text, drill));
    }

    private static Drill drill(String cues) {
        String text = """
                drill: Conducted
                about: Ten requests a second for ten seconds.
                stage:
                  hosts: {quay: {weight: 2}, pier: {weight: 1}}
                  pools:
                    seats:
                      method: weighted-round-robin
                      probe: {path: /afloat, every: 1s, within: 100ms, misses: 3, passes: 2}
                      serves: {workers: 2, queue: 4, time: {fixed: 1ms}}
                      backends: {fulmar: {host: pier}, gannet: {host: pier}}
                    cargo:
                      method: weighted-round-robin
                      weights: host
                      serves: {workers: 2, queue: 4, time: {fixed: 1ms}}
                      backends: {skua: {host: quay}}
                traffic:
                  - {to: seats, arrivals: even, rate: 10/s}
                lasts: 10s
                """;
        return value(DrillReader.read("test", cues.isEmpty() ? text : text + "cues:\n" + cues + "\n"));
    }

    private static <T> T value(Parsed<T> parsed) {
        assertThat(parsed.value()).as("%s", parsed.problems()).isPresent();
        return parsed.value().orElseThrow();
    }
}
