package steelyard.harness.judge;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.S;

import org.junit.jupiter.api.Test;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Measure;
import steelyard.harness.record.Finding;

class RequestMetersTest {

    @Test
    void failed_windowByDueTime_countsDueInsideOnly() {
        // Window [2 s, 4 s). Due at 1.999 (failed, outside), 2.0 (failed), 3.0 (good), 3.9 (failed at 5.4, inside by
        // due time), 4.0 (failed, outside): 2 of 3.
        Play play = new Play()
                .request(1_999 * MS, 10 * MS, Cause.RESET)
                .request(2 * S, 10 * MS, Cause.RESET)
                .request(3 * S, 10 * MS, null)
                .request(3_900 * MS, 1_500 * MS, Cause.GAVE_UP)
                .request(4 * S, 10 * MS, Cause.RESET);

        Finding found =
                play.finding(Expect.that(Measure.FAILED).from(2 * S).to(4 * S).drill());

        assertThat(found.value()).isCloseTo(2 / 3.0, within(1e-12));
        assertThat(found.measured()).isEqualTo("66.7 %");
        assertThat(found.text()).isEqualTo("failed, from 2 s to 4 s");
    }

    @Test
    void failed_withCauses_countsThoseOverAllDue() {
        Play play = new Play()
                .request(S, MS, Cause.RESET)
                .request(S, MS, Cause.REFUSED)
                .request(S, MS, null)
                .request(S, MS, null);

        Finding found =
                play.finding(Expect.that(Measure.FAILED).causes(Cause.RESET).drill());

        assertThat(found.value()).isEqualTo(0.25);
        assertThat(found.text()).isEqualTo("failed (reset), whole play");
    }

    @Test
    void failed_ofOnePool_leavesOtherTrafficOut() {
        Play play = new Play().request(S, MS, Cause.RESET, 0).request(S, MS, null, 1);

        assertThat(play.finding(Expect.that(Measure.FAILED).pool("cargo").drill())
                        .value())
                .isZero();
    }

    @Test
    void failed_worstSecond_beginsAtAnySlice() {
        // One request a slice for 10 s; slices 15 to 20 fail. A second that begins at slice 11 to 15 holds all six:
        // 6 of 10. Aligned seconds would hold 5 at most.
        Play play = new Play();
        for (int slice = 0; slice < 100; slice++) {
            play.request(slice * 100 * MS, MS, slice >= 15 && slice <= 20 ? Cause.REFUSED : null);
        }

        assertThat(play.finding(Expect.that(Measure.FAILED).worst(S).drill()).value())
                .isEqualTo(0.6);
        assertThat(play.finding(Expect.that(Measure.FAILED).drill()).value()).isEqualTo(0.06);
    }

    @Test
    void failed_noneDue_isNotMeasuredAndNotMet() {
        Finding found = new Play()
                .request(S, MS, null)
                .finding(Expect.that(Measure.FAILED).from(2 * S).atMost(1).drill());

        assertThat(found.measured()).isEqualTo("not measured");
        assertThat(found.note()).isEqualTo("no request was due");
        assertThat(found.met()).isFalse();
    }

    @Test
    void longestOutage_halfFailed_countsAndQuietSliceNeitherBreaksNorLengthens() {
        // Slices: 10 all failed, 11 one of two failed (50 %), 12 without traffic, 13 all failed, 14 one of three
        // failed (breaks), 15 failed. Longest run: 10, 11, 13 = 300 ms.
        Play play = new Play().request(900 * MS, MS, null);
        play.request(1_000 * MS, MS, Cause.RESET);
        play.request(1_100 * MS, MS, Cause.RESET).request(1_110 * MS, MS, null);
        play.request(1_300 * MS, MS, Cause.RESET);
        play.request(1_400 * MS, MS, Cause.RESET).request(1_410 * MS, MS, null).request(1_420 * MS, MS, null);
        play.request(1_500 * MS, MS, Cause.RESET);

        Finding found = play.finding(Expect.that(Measure.LONGEST_OUTAGE).drill());

        assertThat(found.value()).isEqualTo(300 * MS);
        assertThat(found.measured()).isEqualTo("300 ms");
    }

    @Test
    void longestOutage_withoutTrafficOrFailure_isZero() {
        assertThat(new Play()
                        .finding(Expect.that(Measure.LONGEST_OUTAGE).drill())
                        .value())
                .isZero();
        assertThat(new Play()
                        .request(S, MS, null)
                        .finding(Expect.that(Measure.LONGEST_OUTAGE).drill())
                        .value())
                .isZero();
    }

    @Test
    void latency_quantile_countsFailedAsInfinitelySlow() {
        // 99 good of 1 to 99 ms and one failed: the 99 % quantile is rank 99 of 100, which is 99 ms; with a second
        // failed (rank ceil(99.99) = 100 of 101, and only 99 are good) it is infinite.
        Play play = new Play();
        for (int ms = 1; ms <= 99; ms++) {
            play.request(S, ms * MS, null);
        }
        play.request(S, 2 * S, Cause.GAVE_UP);
        Expect expect = Expect.that(Measure.LATENCY).quantile(0.99);

        assertThat(play.finding(expect.drill()).value()).isCloseTo(99.0 * MS, within(0.1 * MS));

        Finding two = play.request(S, 2 * S, Cause.GAVE_UP).finding(expect.drill());
        assertThat(two.measured()).isEqualTo("infinite");
        assertThat(two.note()).isEqualTo("2 failed requests of 101");
        assertThat(two.met()).isFalse();
    }

    @Test
    void latency_mean_leavesFailedOutAndSaysSo() {
        Play play =
                new Play().request(S, 10 * MS, null).request(S, 30 * MS, null).request(S, 2 * S, Cause.GAVE_UP);

        Finding found = play.finding(Expect.that(Measure.LATENCY).quantile(-1).drill());

        assertThat(found.value()).isEqualTo(20 * MS);
        assertThat(found.note()).isEqualTo("1 failed request left out");
        assertThat(found.text()).isEqualTo("latency mean, whole play");
    }

    @Test
    void latency_nothingDueOrNothingGood_isNotMeasured() {
        Expect mean = Expect.that(Measure.LATENCY).quantile(-1);

        assertThat(new Play().finding(mean.drill()).note()).isEqualTo("no request was due");
        assertThat(new Play().request(S, MS, Cause.RESET).finding(mean.drill()).note())
                .isEqualTo("no request was answered well");
        assertThat(new Play().finding(Expect.that(Measure.LATENCY).drill()).measured())
                .isEqualTo("not measured");
    }
}
