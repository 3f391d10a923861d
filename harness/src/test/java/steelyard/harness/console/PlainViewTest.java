package steelyard.harness.console;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.PrintWriter;
import java.io.StringWriter;
import java.util.List;
import org.junit.jupiter.api.Test;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Drill;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayBoard;
import steelyard.harness.record.PlayListener.By;
import steelyard.harness.record.Sample;

class PlainViewTest {
    private final Drill drill = Boards.drill("Lose one", List.of("fulmar", "gannet"));
    private final PlayBoard board = new PlayBoard(new Cast(drill));
    private final StringWriter out = new StringWriter();
    private final PlainView view = new PlainView(drill, board, new PrintWriter(out));

    private List<String> linesAtTheEnd() {
        view.close();
        return out.toString().lines().toList();
    }

    @Test
    void cueAndStanding_whenTheyHappen_areALineEach() {
        view.cueApplied(15 * Boards.SECOND, 15 * Boards.SECOND, drill.cues().get(0), By.DRILL);
        view.stood(new Transition(0, Standing.UP, Standing.DOWN, Transition.Cause.MISSES, 17_400_000_000L));
        view.cueApplied(35 * Boards.SECOND, 35 * Boards.SECOND, drill.cues().get(1), By.END);
        assertThat(linesAtTheEnd())
                .containsExactly(
                        "   15.0 s  cue: kill fulmar (the first dies)",
                        "   17.4 s  fulmar: up to down (misses)",
                        "   35.0 s  cue: revive fulmar ends");
    }

    @Test
    void state_afterFiveSeconds_isOneLine() {
        board.requestDue(4_950_000_000L, 0, 0, 0, 0);
        board.requestEnded(4_960_000_000L, 0, 4_950_000_000L, 0, 0, null, 200);
        board.sampled(5 * Boards.SECOND, new Sample(2));
        assertThat(linesAtTheEnd()).containsExactly("    5.0 s  1/s, 1 good, failed 0, pickable 2 of 2");
    }

    @Test
    void readings_failAndComeBack_areLinesAndCounted() {
        view.loadRead(3 * Boards.SECOND, 0, 1, 800, true);
        view.loadRead(4 * Boards.SECOND, 0, 1, 1_000, false);
        view.loadRead(4_500_000_000L, 0, 1, 1_000, false);
        view.loadRead(6 * Boards.SECOND, 0, 4, 700, true);
        board.loadRead(4 * Boards.SECOND, 0, 1, 1_000, false);
        Sample sample = new Sample(2, 1);
        sample.waitingForBackend[0] = 12;
        board.sampled(5 * Boards.SECOND, sample);

        assertThat(linesAtTheEnd())
                .containsExactly(
                        "    4.0 s  fulmar: no fresh reading of its load, so the set weight stands",
                        "    6.0 s  fulmar: weight goes by load again",
                        "    5.0 s  0/s, 0 good, failed 0, pickable 2 of 2, 12 waiting, 1 backend without a fresh reading");
    }

    @Test
    void state_atTheEnd_isOneLine() {
        board.sampled(60 * Boards.SECOND, new Sample(2));
        board.ended(60_100_000_000L, true);
        assertThat(linesAtTheEnd()).containsExactly("   60.1 s  0 offered, 0 good, failed 0, pickable 2 of 2");
    }

    @Test
    void state_longAfterTheTraffic_showsNoRate() {
        board.requestDue(59_950_000_000L, 0, 0, 0, 0);
        board.sampled(60 * Boards.SECOND, new Sample(2));
        board.requestEnded(69_900_000_000L, 0, 59_950_000_000L, 0, 0, null, 200);
        board.ended(69_900_000_000L, true);
        assertThat(linesAtTheEnd()).containsExactly("   69.9 s  1 offered, 1 good, failed 0, pickable 2 of 2");
    }

    @Test
    void state_inLastResort_saysThatAllAreStillPickedFrom() {
        Sample sample = new Sample(2);
        sample.standing[0] = Standing.DOWN;
        sample.standing[1] = Standing.BENCHED;
        board.sampled(5 * Boards.SECOND, sample);
        assertThat(linesAtTheEnd()).containsExactly("    5.0 s  0/s, 0 good, failed 0, pickable 2 of 2, last resort");
    }

    @Test
    void state_whereNobodyMayBePicked_saysSo() {
        Sample sample = new Sample(2);
        sample.standing[0] = Standing.DOWN;
        sample.pickable[0] = false;
        sample.standing[1] = Standing.DOWN;
        sample.pickable[1] = false;
        board.sampled(5 * Boards.SECOND, sample);
        assertThat(linesAtTheEnd()).containsExactly("    5.0 s  0/s, 0 good, failed 0, pickable 0 of 2");
    }

    @Test
    void close_twice_saysNothingTwice() {
        view.cueApplied(0, 0, drill.cues().get(0), By.HAND);
        view.close();
        assertThat(linesAtTheEnd()).containsExactly("    0.0 s  cue by hand: kill fulmar (the first dies)");
    }
}
