package steelyard.backends.behave;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalStateException;
import static steelyard.backends.behave.Trace.MILLI;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.backends.behave.Change.Fail;
import steelyard.backends.behave.Change.FailProbe;
import steelyard.backends.behave.Change.Fill;
import steelyard.backends.behave.Change.Hang;
import steelyard.backends.behave.Change.Heal;
import steelyard.backends.behave.Change.Kill;
import steelyard.backends.behave.Change.Kind;
import steelyard.backends.behave.Change.Load;
import steelyard.backends.behave.Change.Revive;
import steelyard.backends.behave.Change.Slow;
import steelyard.backends.behave.Change.When;

/** What the load page shows, and what reading it costs; worked out by hand, times are milliseconds from the start. */
class LoadReadingsTest {

    /** Two workers, three may wait, 100 a request. */
    private static Play play(long costMillis, Gauge... gauges) {
        return new Play(settings(costMillis, gauges), 0);
    }

    private static BehaviourSettings settings(long costMillis, Gauge... gauges) {
        return BehaviourSettings.of(2, 3, new ServiceTime.Fixed(100 * MILLI))
                .withLoad(new LoadPage(costMillis * MILLI, List.of(gauges)));
    }

    // #0 works 0..100, #1 200..300 on one of two workers. In the second up to 250: 100 + 50 of 2,000, 0.075.
    // Up to 1,050: #0 from 50 on, all of #1: 50 + 100, 0.075. Up to 1,250: #1 from 250 on, 50: 0.025. Up to 1,300:
    // none.
    @ParameterizedTest
    @ValueSource(longs = {0, Long.MIN_VALUE, Long.MAX_VALUE - 1_000_000_000L})
    void cpu_overTheLastSecond_isExactlyTheBusyShare(long origin) {
        Play play = new Play(settings(0), origin);
        play.read(0, 0);
        play.arrive(0, 0);
        play.arrive(1, 200);
        play.read(1, 250);
        play.read(2, 1_050);
        play.read(3, 1_250);
        play.read(4, 1_300);
        play.planned(
                "0 reading 0 ANSWER 200 {cpu=0.0}",
                "100 #0.0 ANSWER 200",
                "250 reading 1 ANSWER 200 {cpu=0.075}",
                "300 #1.0 ANSWER 200",
                "1050 reading 2 ANSWER 200 {cpu=0.075}",
                "1250 reading 3 ANSWER 200 {cpu=0.025}",
                "1300 reading 4 ANSWER 200 {cpu=0.0}");
    }

    // Against a sum over all requests: request i works i * 7 .. i * 7 + 5 on the one worker.
    @Test
    void cpu_thousandsOfCornersInTheSecond_isTheirSum() {
        Play play = new Play(
                BehaviourSettings.of(1, 0, new ServiceTime.Fixed(5 * MILLI)).withLoad(new LoadPage(0, List.of())), 0);
        for (int request = 0; request < 2_000; request++) {
            play.arrive(request, request * 7L);
        }
        play.read(0, 14_003);
        long busyMillis = 0;
        for (long begins = 0; begins < 14_000; begins += 7) {
            busyMillis += Math.max(0, begins + 5 - Math.max(begins, 13_003));
        }
        assertThat(play.trace.lines).last().isEqualTo("14003 reading 0 ANSWER 200 {cpu=" + busyMillis / 1_000.0 + "}");
    }

    // Two in service and one waiting: memory 0.3 + 3 * 0.05, disk as set, heap cut at 1.
    @Test
    void gauges_perRequestHeld_followServiceAndQueue() {
        Play play = play(0, new Gauge("memory", 0.25, 0.125), Gauge.constant("disk", 0.2), new Gauge("heap", 0.5, 0.5));
        play.arrive(0, 0);
        play.arrive(1, 0);
        play.arrive(2, 0);
        play.read(0, 50);
        play.read(1, 300);
        play.planned(
                "50 reading 0 ANSWER 200 {cpu=0.05, memory=0.625, disk=0.2, heap=1.0}",
                "100 #0.0 ANSWER 200",
                "100 #1.0 ANSWER 200",
                "200 #2.0 ANSWER 200",
                "300 reading 1 ANSWER 200 {cpu=0.15, memory=0.25, disk=0.2, heap=0.5}");
    }

    // Both workers busy up to 100: the reading waits, works 100..110, and #2, which came later, starts beside it at
    // 100. The
    // busy share at 110: 100 + 100, its own 10, 10 of #2, of 2,000.
    @Test
    void read_withACost_waitsItsTurnAndHoldsAWorker() {
        Play play = play(10);
        play.arrive(0, 0);
        play.arrive(1, 0);
        play.read(0, 1);
        play.arrive(2, 2);
        play.poll(300);
        play.planned(
                "100 #0.0 ANSWER 200",
                "100 #1.0 ANSWER 200",
                "110 reading 0 ANSWER 200 {cpu=0.11}",
                "200 #2.0 ANSWER 200");
        Figures figures = play.figures(300);
        assertThat(figures.readings()).isEqualTo(1);
        assertThat(figures.readingsFailed()).isZero();
        assertThat(figures.received()).isEqualTo(3);
        assertThat(figures.busyWorkerNanos()).isEqualTo(310 * MILLI);
        assertThat(figures.serviceNanos()).isEqualTo(300 * MILLI);
    }

    @Test
    void read_withACostAndNoRoom_isTurnedAway() {
        Play play = play(10);
        for (int request = 0; request < 5; request++) {
            play.arrive(request, 0);
        }
        play.read(0, 1);
        play.planned("1 reading 0 TURNED_AWAY 503 {}");
        assertThat(play.figures(2).readingsFailed()).isEqualTo(1);
    }

    @Test
    void read_free_isAnsweredPastAFullQueue() {
        Play play = play(0);
        for (int request = 0; request < 5; request++) {
            play.arrive(request, 0);
        }
        play.read(0, 1);
        play.planned("1 reading 0 ANSWER 200 {cpu=0.001}");
    }

    // A reading is work like any other: 10 * 3 + 5 = 35; what costs nothing stays free.
    @Test
    void slow_costsOfReadings_growButNotFromNothing() {
        Play costly = play(10);
        costly.apply(new Slow(3, 5 * MILLI, true), 0);
        costly.read(0, 0);
        costly.poll(100);
        costly.planned("35 reading 0 ANSWER 200 {cpu=0.0175}");
        Play free = play(0);
        free.apply(new Slow(3, 5 * MILLI, true), 0);
        free.read(0, 0);
        free.planned("0 reading 0 ANSWER 200 {cpu=0.0}");
    }

    @Test
    void fail_andFailProbe_spareReadings() {
        Play play = play(0);
        play.apply(new Fail(1, 500, When.AT_ONCE, true), 0);
        play.apply(new FailProbe(), 0);
        play.read(0, 0);
        play.planned("0 reading 0 ANSWER 200 {cpu=0.0}");
    }

    @Test
    void hangAndKill_freeAndCostlyReadings_areSilentOrLost() {
        Play play = play(10);
        play.arrive(0, 0);
        play.arrive(1, 0);
        play.read(0, 1);
        play.apply(new Hang(), 2);
        play.read(1, 3);
        play.apply(new Kill(), 4);
        play.read(2, 5);
        play.planned(
                "2 reading 0 SILENCE 0 {}",
                "3 reading 1 SILENCE 0 {}",
                "4 shut",
                "4 #0.0 LOST 0",
                "4 #1.0 LOST 0",
                "4 reset",
                "5 reading 2 LOST 0 {}");
        assertThat(play.figures(5).readingsFailed()).isEqualTo(3);
    }

    @Test
    void loadAndFill_setGauges_untilTheyAreHealed() {
        Play play = play(0, Gauge.constant("memory", 0.25), Gauge.constant("disk", 0.5));
        play.apply(new Load("memory", 0.9), 0);
        play.apply(new Load("cpu", 1), 0);
        play.apply(new Fill(0.95), 0);
        play.read(0, 0);
        play.apply(new Heal(Kind.LOAD), 1);
        play.read(1, 1);
        play.apply(new Heal(Kind.FILL), 2);
        play.read(2, 2);
        play.planned(
                "0 reading 0 ANSWER 200 {cpu=1.0, memory=0.9, disk=0.95}",
                "1 reading 1 ANSWER 200 {cpu=0.0, memory=0.25, disk=0.95}",
                "2 reading 2 ANSWER 200 {cpu=0.0, memory=0.25, disk=0.5}");
    }

    @Test
    void loadAndFill_ofTheDisk_theLaterOneHolds() {
        Play play = play(0, Gauge.constant("disk", 0.5));
        play.apply(new Fill(0.9), 0);
        play.apply(new Load("disk", 0.6), 0);
        play.read(0, 0);
        play.apply(new Fill(0.7), 1);
        play.read(1, 1);
        play.apply(Heal.all(), 2);
        play.read(2, 2);
        play.planned(
                "0 reading 0 ANSWER 200 {cpu=0.0, disk=0.6}",
                "1 reading 1 ANSWER 200 {cpu=0.0, disk=0.7}",
                "2 reading 2 ANSWER 200 {cpu=0.0, disk=0.5}");
    }

    @Test
    void load_ofAGaugeThatIsNotThere_isShownWhileItLasts() {
        Play play = play(0);
        play.apply(new Load("queue", 0.5), 0);
        play.apply(new Fill(0.9), 0);
        play.read(0, 0);
        play.apply(Heal.all(), 1);
        play.read(1, 1);
        play.planned("0 reading 0 ANSWER 200 {cpu=0.0, queue=0.5, disk=0.9}", "1 reading 1 ANSWER 200 {cpu=0.0}");
    }

    @Test
    void revive_gaugesSetBefore_readAsTheyAre() {
        Play play = play(0, Gauge.constant("memory", 0.25));
        play.apply(new Load("memory", 0.9), 0);
        play.apply(new Kill(), 1);
        play.apply(new Revive(), 2);
        play.read(0, 3);
        play.planned("1 shut", "1 reset", "2 open", "3 reading 0 ANSWER 200 {cpu=0.0, memory=0.25}");
    }

    // Decay 100: right after the revive 100 * 3; a second later 100 * (1 + 2 exp(-10)) = 100.009080.
    @Test
    void cold_afterARevive_workTakesLongerAndThenAsBefore() {
        Play play = new Play(settings(0).withCold(new Cold(3, 100 * MILLI)), 0);
        play.arrive(0, 0);
        play.apply(new Kill(), 150);
        play.apply(new Revive(), 200);
        play.arrive(1, 200);
        play.arrive(2, 1_200);
        play.poll(2_000);
        play.planned(
                "100 #0.0 ANSWER 200",
                "150 shut",
                "150 reset",
                "200 open",
                "500 #1.0 ANSWER 200",
                "1300009080ns #2.0 ANSWER 200");
    }

    @Test
    void cold_readings_costWhatTheyCost() {
        Play play = new Play(settings(10).withCold(new Cold(3, 100 * MILLI)), 0);
        play.apply(new Kill(), 0);
        play.apply(new Revive(), 0);
        play.read(0, 0);
        play.poll(100);
        assertThat(play.trace.lines).last().isEqualTo("10 reading 0 ANSWER 200 {cpu=0.005}");
    }

    @Test
    void read_withoutALoadPage_throws() {
        Play play = new Play(BehaviourSettings.of(1, 0, new ServiceTime.Fixed(1)), 0);
        assertThatIllegalStateException().isThrownBy(() -> play.read(0, 0));
    }
}
