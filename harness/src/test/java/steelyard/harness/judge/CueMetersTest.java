package steelyard.harness.judge;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.record.TestDrill.FULMAR;
import static steelyard.harness.record.TestDrill.GANNET;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.PETREL;
import static steelyard.harness.record.TestDrill.S;
import static steelyard.harness.record.TestDrill.backends;
import static steelyard.harness.record.TestDrill.cue;
import static steelyard.harness.record.TestDrill.fulmar;

import org.junit.jupiter.api.Test;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Pool.Weights;
import steelyard.drills.model.Target;
import steelyard.harness.record.Finding;
import steelyard.harness.record.PlayListener.By;
import steelyard.harness.record.TestDrill;

class CueMetersTest {
    private static final Cue KILL = cue(3 * S, Cue.Kind.KILL, fulmar());
    private static final Cue REVIVE = cue(7 * S, Cue.Kind.REVIVE, fulmar());

    private static Drill drill(Expectation expectation, Cue... cues) {
        TestDrill drill = new TestDrill().lasts(expectation.toNanos()).expect(expectation);
        for (Cue each : cues) {
            drill.cue(each);
        }
        return drill.build();
    }

    private static Expect after(Measure measure, Cue cue) {
        return Expect.that(measure).after(cue.name());
    }

    @Test
    void detectedIn_countsFromWhenTheCueWasApplied() {
        // Due at 3 s, applied at 3.002 s, not picked from since 5.602 s: 2.6 s. An earlier change does not count.
        Play play = new Play()
                .stood(S, FULMAR, Standing.UP, Standing.DOWN, Transition.Cause.MISSES)
                .stood(2 * S, FULMAR, Standing.DOWN, Standing.WARMING, Transition.Cause.PASSES)
                .cue(3_002 * MS, KILL)
                .stood(4 * S, FULMAR, Standing.WARMING, Standing.UP, Transition.Cause.RAMPED)
                .stood(5_602 * MS, FULMAR, Standing.UP, Standing.DOWN, Transition.Cause.MISSES);

        Finding found = play.finding(drill(after(Measure.DETECTED_IN, KILL).build(), KILL));

        assertThat(found.value()).isEqualTo(2_600 * MS);
        assertThat(found.text()).isEqualTo("detected-in, after kill fulmar");
    }

    @Test
    void detectedIn_changeBehindTheNextCue_isNever() {
        Play play = new Play()
                .cue(3 * S, KILL)
                .cue(7 * S, REVIVE)
                .stood(7_100 * MS, FULMAR, Standing.UP, Standing.DOWN, Transition.Cause.MISSES);

        Finding found =
                play.finding(drill(after(Measure.DETECTED_IN, KILL).atMost(9e9).build(), KILL, REVIVE));

        assertThat(found.measured()).isEqualTo("never");
        assertThat(found.note()).isEqualTo("fulmar never stopped being picked from before its next cue");
        assertThat(found.met()).isFalse();
    }

    @Test
    void detectedIn_endOfTheFault_isANextCueToo() {
        Cue hang = new Cue("hang", 3 * S, Cue.Kind.HANG, fulmar(), Cue.Settings.NONE, 2 * S);
        Play play = new Play()
                .cue(3 * S, hang)
                .at(5 * S, to -> to.cueApplied(5 * S, 5 * S, hang, By.END))
                .stood(5_100 * MS, FULMAR, Standing.UP, Standing.DOWN, Transition.Cause.MISSES);

        assertThat(play.finding(drill(after(Measure.DETECTED_IN, hang).build(), hang))
                        .measured())
                .isEqualTo("never");
    }

    @Test
    void detectedIn_ofGroup_isTheLastMembers() {
        Target both = backends("fulmar", "gannet");
        Cue kill = cue(3 * S, Cue.Kind.KILL, both);
        Play play = new Play()
                .cue(3 * S, kill)
                .stood(5 * S, GANNET, Standing.UP, Standing.DOWN, Transition.Cause.MISSES)
                .stood(6 * S, FULMAR, Standing.UP, Standing.DOWN, Transition.Cause.MISSES);
        Play onlyOne =
                new Play().cue(3 * S, kill).stood(5 * S, GANNET, Standing.UP, Standing.DOWN, Transition.Cause.MISSES);
        Expectation expectation = after(Measure.DETECTED_IN, kill).of(both).build();

        assertThat(play.finding(drill(expectation, kill)).value()).isEqualTo(3 * S);
        assertThat(onlyOne.finding(drill(expectation, kill)).measured()).isEqualTo("never");
    }

    @Test
    void detectedIn_untilAStanding_waitsForThatOne() {
        Cue drain = cue(3 * S, Cue.Kind.DRAIN, fulmar());
        Play play = new Play()
                .stood(3 * S, FULMAR, Standing.UP, Standing.DRAINING, Transition.Cause.DRAIN)
                .cue(3 * S, drain)
                .stood(4 * S, FULMAR, Standing.DRAINING, Standing.DOWN, Transition.Cause.ADMIT);
        Expect expect = after(Measure.DETECTED_IN, drain);

        // A drain stops the picks by itself, before it is told as applied.
        assertThat(play.finding(drill(expect.build(), drain)).value()).isZero();
        assertThat(play.finding(drill(
                                expect.until(steelyard.drills.model.Standing.DOWN)
                                        .build(),
                                drain))
                        .value())
                .isEqualTo(S);
    }

    @Test
    void detectedIn_cueNotApplied_isNotMeasured() {
        assertThat(new Play()
                        .finding(drill(after(Measure.DETECTED_IN, KILL).build(), KILL))
                        .note())
                .isEqualTo("the cue kill fulmar was not applied");
    }

    /** One pick each 10 ms from 0 to 10 s, in turns. */
    private static Play picks(int[] before, long changeNanos, int... behind) {
        Play play = new Play();
        for (int tick = 0; tick < 1_000; tick++) {
            long at = tick * 10 * MS;
            int[] turns = at < changeNanos ? before : behind;
            play.attempt(at, MS, turns[tick % turns.length]);
        }
        return play;
    }

    @Test
    void shiftedIn_isTheFirstInstantAfterWhichEverySecondHolds() {
        // Fulmar gets every third pick up to 5.6 s. The second that begins at 5.5 s holds three of them in a hundred,
        // that at 5.6 s none: 2.6 s behind the cue at 3 s.
        Play play = picks(new int[] {FULMAR, GANNET, PETREL}, 5_600 * MS, GANNET, PETREL)
                .cue(3 * S, KILL);

        assertThat(play.finding(drill(after(Measure.SHIFTED_IN, KILL).build(), KILL))
                        .value())
                .isEqualTo(2_600 * MS);
    }

    @Test
    void shiftedIn_onePickInAHundred_holds() {
        // One stray pick at 7.005 s among a hundred a second: 1 of 101 is below 1 %; three are not, and the last second
        // with all three begins at 7.0 s.
        int[] others = {GANNET, PETREL};
        Play one = picks(others, 0, others).cue(3 * S, KILL).attempt(7_005 * MS, MS, FULMAR);
        Play three = picks(others, 0, others).cue(3 * S, KILL);
        for (int i = 0; i < 3; i++) {
            three.attempt(7_005 * MS, MS, FULMAR);
        }
        Drill drill = drill(after(Measure.SHIFTED_IN, KILL).build(), KILL);

        assertThat(one.finding(drill).value()).isZero();
        assertThat(three.finding(drill).value()).isEqualTo(4_100 * MS);
    }

    @Test
    void shiftedIn_stillPickedAtTheNextCue_isNever() {
        Play play = picks(new int[] {FULMAR, GANNET, PETREL}, 6_500 * MS, GANNET, PETREL)
                .cue(3 * S, KILL)
                .cue(7 * S, REVIVE);

        Finding found = play.finding(drill(after(Measure.SHIFTED_IN, KILL).build(), KILL, REVIVE));

        assertThat(found.measured()).isEqualTo("never");
        assertThat(found.note()).isEqualTo("fulmar still took more than 1 % at its next cue or the end");
    }

    @Test
    void shiftedIn_withoutPicksOrTime_isNotMeasured() {
        Cue soon = cue(3_500 * MS, Cue.Kind.REVIVE, fulmar());
        Expectation expectation = after(Measure.SHIFTED_IN, KILL).build();

        assertThat(new Play().cue(3 * S, KILL).finding(drill(expectation, KILL)).note())
                .isEqualTo("nothing was picked for its pool");
        assertThat(new Play()
                        .cue(3 * S, KILL)
                        .cue(3_500 * MS, soon)
                        .finding(drill(expectation, KILL, soon))
                        .note())
                .isEqualTo("fulmar had its next cue, or the play its end, within 1 s");
    }

    @Test
    void settledIn_countsFromTheCueToTheFirstSecondThatKeepsItsShares() {
        // Three equal backends, 100 picks a second. Fulmar returns at 3 s but gets nothing until 5 s, then a third.
        // A share of 1/3 of 100 may be off by 3 * sqrt(2/9/100) = 0.1414. The second that begins at 4.6 s gives fulmar
        // 20 of 100 (off 0.1333), that at 4.5 s 17 at most (off 0.163): 1.6 s.
        Cue revive = cue(3 * S, Cue.Kind.REVIVE, fulmar());
        Play play =
                picks(new int[] {GANNET, PETREL}, 5 * S, FULMAR, GANNET, PETREL).cue(3 * S, revive);

        assertThat(play.finding(drill(after(Measure.SETTLED_IN, revive).build(), revive))
                        .value())
                .isEqualTo(1_600 * MS);
    }

    @Test
    void settledIn_killedBackendIsDueNothing() {
        // Fulmar is dead since 3 s; the balancer goes on picking it until 5 s. Due: 0, 1/2, 1/2; fulmar may be off
        // 0.03.
        // The second that begins at 4.9 s gives it 3 or 4 of 100, that at 5 s none. The share of a backend with a due
        // of
        // 0 has no error of its own, so 3 points count: 3 of 100 holds, 4 does not. Ticks 490..499 with turn 0 of three
        // are 492, 495, 498: three. So the second at 4.9 s holds, and that at 4.8 s (6 of 100) does not: 1.9 s.
        Play play =
                picks(new int[] {FULMAR, GANNET, PETREL}, 5 * S, GANNET, PETREL).cue(3 * S, KILL);

        assertThat(play.finding(drill(after(Measure.SETTLED_IN, KILL).build(), KILL))
                        .value())
                .isEqualTo(1_900 * MS);
    }

    @Test
    void settledIn_reweighAndDrainChangeWhatIsDue() {
        // Weights 1, 1, 1 become 4, 1, 1 at 3 s, and petrel has been drained: due 4/5 and 1/5, as picked.
        Cue reweigh = cue(3 * S, Cue.Kind.REWEIGH, fulmar());
        Play play = picks(new int[] {FULMAR, GANNET}, 3 * S, FULMAR, FULMAR, FULMAR, FULMAR, GANNET)
                .stood(S, PETREL, Standing.UP, Standing.DRAINING, Transition.Cause.DRAIN)
                .at(3 * S, to -> to.reweighed(3 * S, false, FULMAR, 4))
                .cue(3 * S, reweigh);

        assertThat(play.finding(drill(after(Measure.SETTLED_IN, reweigh).build(), reweigh))
                        .value())
                .isZero();
    }

    /** Thirds all through, but the tenths at 5.0 s, 5.8 s and 5.9 s go to fulmar alone: only one second holds all three. */
    private static Play oneMiss(int ticks) {
        Play play = new Play();
        int turn = 0;
        for (int tick = 0; tick < ticks; tick++) {
            int tenth = tick / 10;
            boolean burst = tenth == 50 || tenth == 58 || tenth == 59;
            play.attempt(tick * 10 * MS, MS, burst ? FULMAR : turn++ % 3);
        }
        return play;
    }

    @Test
    void settledIn_oneSecondInAHundredMayMiss() {
        // The second that begins at 5.0 s gives fulmar 30 + 70/3 of 100: off 0.2, beyond 0.1414; its neighbours hold
        // two
        // of the three tenths: 20 + 80/3, off 0.137 at most. From 1 s there are 111 seconds to the end at 13 s, so one
        // may miss; up to 10 s there are 81, so time counts from behind it, 5.1 s.
        Cue cue = cue(S, Cue.Kind.HEAL, fulmar());
        Expect expect = after(Measure.SETTLED_IN, cue);

        assertThat(oneMiss(1_300)
                        .cue(S, cue)
                        .finding(drill(expect.to(13 * S).build(), cue))
                        .value())
                .isZero();
        assertThat(oneMiss(1_000)
                        .cue(S, cue)
                        .finding(drill(expect.to(10 * S).build(), cue))
                        .value())
                .isEqualTo(4_100 * MS);
    }

    @Test
    void settledIn_neverUnderHostWeightsOrWithoutTime() {
        Cue revive = cue(3 * S, Cue.Kind.REVIVE, fulmar());
        Cue drain = cue(3_900 * MS, Cue.Kind.DRAIN, backends("petrel"));
        Expectation expectation = after(Measure.SETTLED_IN, revive).build();
        int[] pair = {GANNET, PETREL};

        assertThat(picks(pair, 0, pair)
                        .cue(3 * S, revive)
                        .finding(drill(expectation, revive))
                        .measured())
                .isEqualTo("never");
        Drill byHost = new TestDrill()
                .weights(Weights.HOST)
                .cue(revive)
                .expect(expectation)
                .build();
        assertThat(picks(pair, 0, pair).cue(3 * S, revive).finding(byHost).measured())
                .isEqualTo("not measured");
        assertThat(picks(pair, 0, pair)
                        .cue(3 * S, revive)
                        .cue(3_900 * MS, drain)
                        .finding(drill(expectation, revive, drain))
                        .note())
                .isEqualTo("the next cue, or the end of the play, came within 1 s");
    }

    @Test
    void drainedIn_isTheLastEndOnTheTarget() {
        Cue drain = cue(3 * S, Cue.Kind.DRAIN, fulmar());
        Play play = new Play()
                .attempt(2_900 * MS, 400 * MS, FULMAR)
                .attempt(2_950 * MS, 1_000 * MS, FULMAR)
                .attempt(2_950 * MS, 3_000 * MS, GANNET)
                .cue(3 * S, drain)
                .cue(7 * S, REVIVE);

        Finding found = play.finding(drill(after(Measure.DRAINED_IN, drain).build(), drain, REVIVE));

        assertThat(found.value()).isEqualTo(950 * MS);
    }

    @Test
    void drainedIn_whatItsNextCueLetsInAtOnce_isNoPartOfTheDrain() {
        Cue drain = cue(3 * S, Cue.Kind.DRAIN, fulmar());
        Cue admit = cue(7 * S, Cue.Kind.ADMIT, fulmar());
        Play play = new Play()
                .attempt(2_900 * MS, 400 * MS, FULMAR)
                .cue(3 * S, drain)
                .cue(7 * S, admit)
                .attempt(7 * S, 100 * MS, FULMAR)
                .attempt(7 * S, 200 * MS, FULMAR);

        Finding found = play.finding(drill(after(Measure.DRAINED_IN, drain).build(), drain, admit));

        assertThat(found.value()).isEqualTo(300 * MS); // 2.9 s + 0.4 s - 3 s
    }

    @Test
    void drainedIn_nothingInFlight_isZero_andStillInFlight_isNever() {
        Cue drain = cue(3 * S, Cue.Kind.DRAIN, fulmar());
        Expectation expectation = after(Measure.DRAINED_IN, drain).build();
        Play open = new Play()
                .attempt(2_900 * MS, 200 * MS, FULMAR)
                .attempt(2_900 * MS, 5 * S, FULMAR, 99, 1, Outcome.CUT)
                .cue(3 * S, drain)
                .cue(7 * S, REVIVE);

        assertThat(new Play()
                        .cue(3 * S, drain)
                        .finding(drill(expectation, drain))
                        .value())
                .isZero();
        Finding found = open.finding(drill(expectation, drain, REVIVE));
        assertThat(found.measured()).isEqualTo("never");
        assertThat(found.note()).isEqualTo("fulmar still had 1 attempt in flight at its next cue or the end");
    }
}
