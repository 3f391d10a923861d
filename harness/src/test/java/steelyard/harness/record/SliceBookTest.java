package steelyard.harness.record;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.record.TestDrill.FULMAR;
import static steelyard.harness.record.TestDrill.GANNET;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.S;
import static steelyard.harness.record.TestDrill.SEATS;

import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import steelyard.balancer.core.standing.Standing;
import steelyard.drills.model.Cause;

class SliceBookTest {
    private final List<String> rows = new ArrayList<>();
    private final SliceBook book = new SliceBook(new Cast(new TestDrill().build()), this::note);
    private final Sample sample = new Sample(4);

    private void note(Slice slice) {
        rows.add(slice.index() + ": " + slice.offered() + " = " + slice.ok() + " + " + slice.failed());
    }

    private void samples(int from, int to) {
        for (int slice = from; slice <= to; slice++) {
            book.sampled(slice * 100 * MS, sample);
        }
    }

    @Test
    void slice_requestEndsLater_waitsForItsEndAndCountsByDueTime() {
        book.requestDue(50 * MS, 0, 0, 0, 0);
        book.requestDue(60 * MS, 1, 0, 0, 0);
        book.requestEnded(70 * MS, 1, 60 * MS, 0, 0, null, 200);
        samples(1, 9);
        assertThat(rows).isEmpty();

        book.requestEnded(950 * MS, 0, 50 * MS, 0, 0, Cause.GAVE_UP, 0);
        samples(10, 10);

        assertThat(rows).startsWith("0: 2 = 1 + 1", "1: 0 = 0 + 0").hasSize(10 - SliceBook.GRACE);
    }

    @Test
    void slice_requestToldInALaterSlice_countsInTheOneThatItWasDueIn() {
        // Due at 99 ms, told at 130 ms: a stage that lags. The request after it is due and told in slice 1.
        book.requestDue(130 * MS, 0, 0, 0, 0);
        book.requestDue(140 * MS, 1, 0, 0, 0);
        samples(2, 3);
        book.requestEnded(310 * MS, 1, 140 * MS, 0, 0, null, 200);
        book.requestEnded(320 * MS, 0, 99 * MS, 0, 0, null, 200);
        samples(4, 8);

        assertThat(rows).startsWith("0: 1 = 1 + 0", "1: 1 = 1 + 0", "2: 0 = 0 + 0");
    }

    @Test
    void slice_requestToldBeyondTheGrace_isCountedInTheOldestOpenSlice() {
        samples(1, 10);
        assertThat(rows).hasSize(10 - SliceBook.GRACE);
        book.requestDue(1_010 * MS, 0, 0, 0, 0);
        book.requestEnded(1_020 * MS, 0, 10 * MS, 0, 0, null, 200);
        book.ended(1_100 * MS, true);

        assertThat(rows).contains("7: 1 = 1 + 0").doesNotHaveDuplicates();
    }

    @Test
    void ended_openRequests_handsOutEverythingInOrder() {
        book.requestDue(50 * MS, 0, 0, 0, 0);
        book.requestDue(250 * MS, 1, 0, 0, 0);
        book.requestEnded(260 * MS, 1, 250 * MS, 0, 0, null, 200);
        book.ended(300 * MS, false);

        assertThat(rows).containsExactly("0: 0 = 0 + 0", "1: 0 = 0 + 0", "2: 1 = 1 + 0");
    }

    @Test
    void ended_afterAnInterruption_handsOutNothingBeyondIt() {
        book.requestDue(50 * MS, 0, 0, 0, 0);
        book.requestDue(150 * MS, 1, 0, 0, 0);
        book.interrupted(160 * MS);
        book.requestEnded(410 * MS, 0, 50 * MS, 0, 0, null, 200);
        book.ended(2_000 * MS, false);

        assertThat(rows).containsExactly("0: 1 = 1 + 0", "1: 0 = 0 + 0");
    }

    @Test
    void slice_picksAndSample_areThoseOfTheSlice() {
        List<Slice> kept = new ArrayList<>();
        List<String> states = new ArrayList<>();
        SliceBook both = new SliceBook(new Cast(new TestDrill().build()), slice -> {
            kept.add(slice);
            states.add(slice.picked(FULMAR) + " " + slice.retries() + " " + slice.standing(FULMAR) + " "
                    + slice.utilisation(FULMAR) + " " + slice.inFlight(GANNET));
        });
        both.attemptPicked(10 * MS, SEATS, FULMAR, 0, 1, 1);
        both.attemptPicked(20 * MS, SEATS, FULMAR, 0, 2, 2);
        sample.standing[FULMAR] = Standing.DOWN;
        sample.inFlight[GANNET] = 7;
        // Two workers: 50 ms of busy time in a slice of 100 ms is a quarter.
        sample.busyNanos[FULMAR] = 50 * MS;
        both.sampled(100 * MS, sample);
        both.attemptPicked(100 * MS, SEATS, FULMAR, 1, 1, 1);
        sample.standing[FULMAR] = Standing.UP;
        both.sampled(200 * MS, sample);
        both.ended(250 * MS, true);

        assertThat(states).containsExactly("2 1 DOWN 0.25 7", "1 0 UP 0.0 7");
    }

    @Test
    void slice_missedSamples_areFilledFromTheNextOne() {
        sample.inFlight[GANNET] = 3;
        // The timer stalled: the first sample comes at 350 ms and closes three slices.
        book.sampled(350 * MS, sample);
        book.ended(400 * MS, true);
        assertThat(rows).hasSize(3);
    }

    @Test
    void book_longPlay_keepsOnlyOpenSlices() {
        // An hour of play: as many slices as are open together are ever made.
        List<Slice> distinct = new ArrayList<>();
        SliceBook hour = new SliceBook(new Cast(new TestDrill().build()), slice -> {
            if (distinct.stream().noneMatch(each -> each == slice)) {
                distinct.add(slice);
            }
        });
        for (int slice = 0; slice < 36_000; slice++) {
            long due = slice * 100 * MS;
            hour.requestDue(due, slice, 0, 0, 0);
            hour.requestEnded(due + 50 * MS, slice, due, 0, 0, null, 200);
            hour.sampled(due + 100 * MS, sample);
        }
        hour.ended(3_600 * S, true);
        assertThat(distinct).hasSizeLessThan(10);
    }
}
