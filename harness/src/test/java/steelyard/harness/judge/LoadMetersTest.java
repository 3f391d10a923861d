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

import java.util.Arrays;
import java.util.function.IntToDoubleFunction;
import org.junit.jupiter.api.Test;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Sample;
import steelyard.harness.record.TestDrill;

/** Measures of load-driven weights, of plays whose answers are worked out by hand. */
class LoadMetersTest {
    /** Busy shares of slices without a rhythm of their own; before and after it nothing is busy. */
    private static final String BUSY = "00010011010001110010000110100100";

    private static final Cast CAST = new Cast(new TestDrill().build());
    private static final long SLICE = 100 * MS;

    private static double busy(int slice) {
        return slice < 0 || slice >= BUSY.length() ? 0 : BUSY.charAt(slice) - '0';
    }

    private static WeightLag lag(long periodNanos, int... members) {
        long[] periods = new long[members.length];
        Arrays.fill(periods, periodNanos);
        return new WeightLag(new Window(0, 4 * S), members, periods, CAST);
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
        Reading read = play(lag(S, FULMAR), slice -> 1 - 0.9 * busy(slice - 3), slice -> 1);

        assertThat(read.value()).isEqualTo(300 * MS);
        assertThat(read.note()).isEqualTo("correlation -1");
    }

    @Test
    void weightLag_weightAnswersWithinItsSlice_isZeroAndNotNothing() {
        Reading read = play(lag(S, FULMAR), slice -> 2 - busy(slice), slice -> 1);

        assertThat(read.hasValue()).isTrue();
        assertThat(read.value()).isZero();
    }

    @Test
    void weightLag_ofSeveral_isThatOfTheOneThatTrailsMost() {
        Reading read = play(
                lag(S, FULMAR, GANNET, PETREL), slice -> 1 - 0.9 * busy(slice - 3), slice -> 1 - 0.5 * busy(slice - 6));

        assertThat(read.value()).isEqualTo(600 * MS);
        assertThat(read.note()).isEqualTo("correlation -1 of gannet");
    }

    @Test
    void weightLag_fivePeriods_isTheFarthestThatIsLooked() {
        // Periods of 100 ms: shifts of none to five slices, and the weight trails by seven.
        Reading read = play(lag(SLICE, FULMAR), slice -> 1 - 0.9 * busy(slice - 7), slice -> 1);

        assertThat(read.value()).isLessThanOrEqualTo(500.0 * MS);
        assertThat(read.note()).doesNotContain("-1");
    }

    @Test
    void weightLag_aSeriesIsConstant_isNotMeasured() {
        assertThat(play(lag(S, FULMAR), slice -> 0.4, slice -> 1))
                .isEqualTo(Reading.notMeasured("the weight of fulmar never changed"));
        assertThat(play(lag(S, PETREL), slice -> 1, slice -> 1).note()).isEqualTo("the weight of petrel never changed");
    }

    @Test
    void weightLag_utilisationIsConstantOrNothingIsReadOrTooShort_isNotMeasured() {
        Sample sample = new Sample(4);
        WeightLag idle = lag(S, SKUA);
        WeightLag unread = lag(0, SKUA);
        WeightLag brief = lag(S, SKUA);
        for (int slice = 0; slice < 40; slice++) {
            sample.effectiveWeight[SKUA] = slice;
            idle.sampled((slice + 1) * SLICE, sample);
            unread.sampled((slice + 1) * SLICE, sample);
            if (slice < 9) {
                brief.sampled((slice + 1) * SLICE, sample);
            }
        }

        assertThat(idle.read().note()).isEqualTo("the utilisation of skua never changed");
        assertThat(unread.read().note()).isEqualTo("nothing reads the load of skua");
        assertThat(brief.read().note()).isEqualTo("the window has fewer than 10 slices");
    }

    @Test
    void weightLag_bothRise_isNotMeasured() {
        // Both grow from slice to slice, so at every shift the coefficient is above zero.
        WeightLag meter = lag(S, FULMAR);
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
        WeightLag meter = lag(S, FULMAR);
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

    private static Swing swing(long toNanos, long periodNanos, int... members) {
        return new Swing(new Window(0, toNanos), members, new long[] {periodNanos, 0}, CAST);
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
        Swing meter = swing(6_500 * MS, S, FULMAR);
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
        Swing meter = swing(4 * S, S, FULMAR, GANNET, PETREL);
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
        Swing one = swing(4 * S, S, FULMAR);
        picks(one, 2 * S, 1, 4);
        one.ended(4 * S, true);
        Swing unread = swing(4 * S, 0, FULMAR);
        picks(unread, 2 * S, 1, 4);
        picks(unread, 3 * S, 1, 4);
        unread.ended(4 * S, true);

        assertThat(one.read())
                .isEqualTo(Reading.notMeasured("fewer than two load-probe periods with picks, behind the first two"));
        assertThat(unread.read()).isEqualTo(Reading.notMeasured("nothing reads the load of the target"));
    }

    @Test
    void swing_playIsInterrupted_countsPeriodsThatWerePlayed() {
        Swing meter = swing(60 * S, S, FULMAR);
        picks(meter, 2 * S, 1, 3);
        picks(meter, 3 * S, 2, 2);
        picks(meter, 4 * S, 4, 0);
        meter.ended(4_200 * MS, false);

        assertThat(meter.read().value()).isCloseTo(0.25, within(1e-12));
    }
}
