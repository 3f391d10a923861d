package steelyard.harness.judge;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static steelyard.harness.record.TestDrill.FULMAR;
import static steelyard.harness.record.TestDrill.GANNET;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.PETREL;
import static steelyard.harness.record.TestDrill.S;
import static steelyard.harness.record.TestDrill.SEATS;
import static steelyard.harness.record.TestDrill.SKUA;
import static steelyard.harness.record.TestDrill.fulmar;

import java.util.function.IntToDoubleFunction;
import org.junit.jupiter.api.Test;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Measure;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Finding;
import steelyard.harness.record.Sample;
import steelyard.harness.record.TestDrill;
import steelyard.harness.record.Verdict;

/** Measures of load-driven weights, of plays whose answers are worked out by hand. */
class LoadMetersTest {
    /** Busy shares of slices without a rhythm of their own; before and after it nothing is busy. */
    private static final String BUSY = "00010011010001110010000110100100";

    private static final Cast CAST = cast(S);
    private static final long SLICE = 100 * MS;

    private static double busy(int slice) {
        return slice < 0 || slice >= BUSY.length() ? 0 : BUSY.charAt(slice) - '0';
    }

    /** Pool seats weighs by load, read that often; pool cargo, of skua, does not. */
    private static Cast cast(long periodNanos) {
        return new Cast(new TestDrill().load(periodNanos).build());
    }

    private static WeightLag lag(int... members) {
        return new WeightLag(new Window(0, 4 * S), members, CAST);
    }

    /** Forty slices; each backend has two workers, so a busy slice adds 200 ms of busy time. */
    private static Reading play(WeightLag meter, IntToDoubleFunction fulmar, IntToDoubleFunction gannet) {
        Sample sample = new Sample(4);
        for (int slice = 0; slice < 40; slice++) {
            sample.busyNanos[FULMAR] += (long) (busy(slice) * 2 * SLICE);
            sample.busyNanos[GANNET] += (long) (busy(slice) * 2 * SLICE);
            sample.effectiveWeight[FULMAR] = fulmar.applyAsDouble(slice);
            sample.effectiveWeight[GANNET] = gannet.applyAsDouble(slice);
            meter.sampled((slice + 1) * SLICE, sample);
        }
        meter.ended(4 * S, true);
        return meter.read();
    }

    @Test
    void weightLag_weightIsThePictureOfUtilisationThreeSlicesBefore_isThree() {
        // w(t) = 1 - 0.9 u(t - 3): at a shift of three slices every pair lies on one falling line, so r = -1 there
        // alone.
        Reading read = play(lag(FULMAR), slice -> 1 - 0.9 * busy(slice - 3), slice -> 1);

        assertThat(read.value()).isEqualTo(300 * MS);
        assertThat(read.note()).isEqualTo("correlation -1");
    }

    @Test
    void weightLag_weightAnswersWithinItsSlice_isZeroAndNotNothing() {
        Reading read = play(lag(FULMAR), slice -> 2 - busy(slice), slice -> 1);

        assertThat(read.hasValue()).isTrue();
        assertThat(read.value()).isZero();
    }

    @Test
    void weightLag_ofSeveral_isThatOfTheOneThatTrailsMost() {
        Reading read = play(
                lag(FULMAR, GANNET, PETREL), slice -> 1 - 0.9 * busy(slice - 3), slice -> 1 - 0.5 * busy(slice - 6));

        assertThat(read.value()).isEqualTo(600 * MS);
        assertThat(read.note()).isEqualTo("correlation -1 of gannet");
    }

    @Test
    void weightLag_fivePeriods_isTheFarthestThatIsLooked() {
        // Periods of 100 ms: shifts of none to five slices, and the weight trails by seven.
        Reading read = play(
                new WeightLag(new Window(0, 4 * S), new int[] {FULMAR}, cast(SLICE)),
                slice -> 1 - 0.9 * busy(slice - 7),
                slice -> 1);

        assertThat(read.value()).isLessThanOrEqualTo(500.0 * MS);
        assertThat(read.note()).doesNotContain("-1");
    }

    @Test
    void weightLag_aSeriesIsConstant_isNotMeasured() {
        assertThat(play(lag(FULMAR), slice -> 0.4, slice -> 1))
                .isEqualTo(Reading.notMeasured("the weight of fulmar never changed"));
        assertThat(play(lag(PETREL), slice -> 1, slice -> 1).note()).isEqualTo("the weight of petrel never changed");
    }

    @Test
    void weightLag_utilisationIsConstantOrNothingIsReadOrTooShort_isNotMeasured() {
        Sample sample = new Sample(4);
        WeightLag idle = lag(PETREL);
        WeightLag unread = lag(SKUA);
        WeightLag brief = lag(PETREL);
        for (int slice = 0; slice < 40; slice++) {
            sample.effectiveWeight[PETREL] = slice;
            idle.sampled((slice + 1) * SLICE, sample);
            unread.sampled((slice + 1) * SLICE, sample);
            if (slice < 9) {
                brief.sampled((slice + 1) * SLICE, sample);
            }
        }

        assertThat(idle.read().note()).isEqualTo("the utilisation of petrel never changed");
        assertThat(unread.read().note()).isEqualTo("nothing reads the load of skua");
        assertThat(brief.read().note()).isEqualTo("the window has fewer than 10 slices");
    }

    @Test
    void weightLag_bothRise_isNotMeasured() {
        // Both grow from slice to slice, so at every shift the coefficient is above zero.
        WeightLag meter = lag(FULMAR);
        Sample sample = new Sample(4);
        for (int slice = 0; slice < 40; slice++) {
            sample.busyNanos[FULMAR] += slice * MS;
            sample.effectiveWeight[FULMAR] = slice;
            meter.sampled((slice + 1) * SLICE, sample);
        }

        assertThat(meter.read())
                .isEqualTo(Reading.notMeasured("weight and utilisation of fulmar never moved against each other"));
    }

    @Test
    void weightLag_samplesComeLateOrLeaveSlicesOut_countsThemAsTheBookOfSlicesDoes() {
        // One sample at 350 ms stands for three slices, as in slices.csv; the lag of the rest is found all the same.
        WeightLag meter = lag(FULMAR);
        Sample sample = new Sample(4);
        for (int slice = 0; slice < 40; slice++) {
            sample.busyNanos[FULMAR] += (long) (busy(slice) * 2 * SLICE);
            sample.effectiveWeight[FULMAR] = 1 - 0.9 * busy(slice - 3);
            if (slice >= 2) {
                meter.sampled((slice + 1) * SLICE, sample);
            }
        }

        assertThat(meter.read().value()).isEqualTo(300 * MS);
    }

    private static Swing swing(long toNanos, int... members) {
        return new Swing(new Window(0, toNanos), members, CAST);
    }

    private static void picks(Swing meter, long atNanos, int fulmar, int gannet) {
        for (int i = 0; i < fulmar + gannet; i++) {
            meter.attemptPicked(atNanos + i, SEATS, i < fulmar ? FULMAR : GANNET, i, 1, 1);
        }
    }

    @Test
    void swing_ofBackend_isPeakToPeakBehindTheFirstTwoPeriods() {
        // Periods of 1 s. Fulmar has 100 % and 0 % in the two that are left out, then 50, 70, none picked, 40 %; the
        // period
        // that ends outside the window of 6.5 s, with 100 %, does not count: 70 - 40.
        Swing meter = swing(6_500 * MS, FULMAR);
        picks(meter, 100 * MS, 10, 0);
        picks(meter, S, 0, 10);
        picks(meter, 2 * S, 5, 5);
        picks(meter, 3 * S + 900 * MS, 7, 3);
        picks(meter, 5 * S, 4, 6);
        picks(meter, 6 * S, 9, 0);
        meter.ended(8 * S, true);

        assertThat(meter.read().value()).isCloseTo(0.3, within(1e-12));
    }

    @Test
    void swing_ofSeveral_isThatOfTheOneThatSwingsMost() {
        // Shares of fulmar 10, 20 %; of gannet 40, 80 %; of petrel 50, 0 %.
        Swing meter = swing(4 * S, FULMAR, GANNET, PETREL);
        picks(meter, 2 * S, 1, 4);
        for (int i = 0; i < 5; i++) {
            meter.attemptPicked(2 * S + 500 * MS, SEATS, PETREL, i, 1, 1);
        }
        picks(meter, 3 * S, 2, 8);
        meter.ended(4 * S, true);

        assertThat(meter.read().value()).isCloseTo(0.5, within(1e-12));
    }

    @Test
    void swing_onePeriodOrNoReadings_isNotMeasured() {
        Swing one = swing(4 * S, FULMAR);
        picks(one, 2 * S, 1, 4);
        one.ended(4 * S, true);
        Swing unread = swing(4 * S, SKUA);
        picks(unread, 2 * S, 1, 4);
        picks(unread, 3 * S, 1, 4);
        unread.ended(4 * S, true);

        assertThat(one.read())
                .isEqualTo(Reading.notMeasured("fewer than two load-probe periods with picks, behind the first two"));
        assertThat(unread.read()).isEqualTo(Reading.notMeasured("nothing reads the load of the target"));
    }

    @Test
    void swing_playIsInterrupted_countsPeriodsThatWerePlayed() {
        Swing meter = swing(60 * S, FULMAR);
        picks(meter, 2 * S, 1, 3);
        picks(meter, 3 * S, 2, 2);
        picks(meter, 4 * S, 4, 0);
        meter.ended(4_200 * MS, false);

        assertThat(meter.read().value()).isCloseTo(0.25, within(1e-12));
    }

    @Test
    void bothMeasures_ofADrillThatWeighsByLoad_areJudgedAndInTheStandardSet() {
        // Weights trail by two slices; shares of fulmar are 40 % in the third second and 60 % in the fourth.
        Play play = new Play();
        long[] busyNanos = {0};
        for (int slice = 0; slice < 40; slice++) {
            int at = slice;
            play.sample((slice + 1) * SLICE, sample -> {
                busyNanos[0] += (long) (busy(at) * 2 * SLICE);
                sample.busyNanos[FULMAR] = busyNanos[0];
                sample.effectiveWeight[FULMAR] = 1 - 0.9 * busy(at - 2);
            });
        }
        for (int i = 0; i < 10; i++) {
            play.attempt(2 * S + i * MS, MS, i < 4 ? FULMAR : GANNET);
            play.attempt(3 * S + i * MS, MS, i < 6 ? FULMAR : GANNET);
        }
        Drill drill = new TestDrill()
                .load(S)
                .lasts(4 * S)
                .expect(Expect.that(Measure.WEIGHT_LAG)
                        .of(fulmar())
                        .to(4 * S)
                        .atMost(250 * MS)
                        .build())
                .expect(Expect.that(Measure.SWING)
                        .of(fulmar())
                        .to(4 * S)
                        .atMost(0.1)
                        .build())
                .build();

        Verdict verdict = play.verdict(drill);

        assertThat(verdict.expectations()).extracting(Finding::measured).containsExactly("200 ms", "20 %");
        assertThat(verdict.expectations()).extracting(Finding::met).containsExactly(true, false);
        assertThat(verdict.measures())
                .filteredOn(each -> each.measure() == Measure.WEIGHT_LAG || each.measure() == Measure.SWING)
                .extracting(Finding::text)
                .containsExactly("weight-lag of pool seats, whole play", "swing of pool seats, whole play");
        assertThat(play.verdict(new TestDrill().build()).measures()).noneMatch(each -> each.measure() == Measure.SWING);
    }

    @Test
    void settledIn_underLoadWeights_isNotMeasured() {
        Cue kill = TestDrill.cue(S, Cue.Kind.KILL, fulmar());
        Drill drill = new TestDrill()
                .load(S)
                .cue(kill)
                .expect(Expect.that(Measure.SETTLED_IN).after(kill.name()).build())
                .build();

        assertThat(new Play().cue(S, kill).finding(drill).note())
                .isEqualTo("weights by load move what is due; use share or swing");
    }
}
