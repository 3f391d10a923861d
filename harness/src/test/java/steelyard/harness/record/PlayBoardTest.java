package steelyard.harness.record;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.record.TestDrill.FULMAR;
import static steelyard.harness.record.TestDrill.GANNET;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.S;
import static steelyard.harness.record.TestDrill.SEATS;
import static steelyard.harness.record.TestDrill.cue;
import static steelyard.harness.record.TestDrill.fulmar;

import java.util.Map;
import org.junit.jupiter.api.Test;
import steelyard.balancer.core.standing.Standing;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.harness.record.PlayBoard.Figures;

class PlayBoardTest {
    private final PlayBoard board = new PlayBoard(new Cast(new TestDrill().build()));
    private final Sample sample = new Sample(4);

    @Test
    void now_beforeTheFirstSlice_isEmpty() {
        Figures now = board.now();

        assertThat(now.atNanos()).isZero();
        assertThat(now.offered()).isZero();
        assertThat(now.lastCue()).isNull();
        assertThat(now.backends())
                .extracting(each -> each.name())
                .containsExactly("fulmar", "gannet", "petrel", "skua");
    }

    @Test
    void now_betweenSlices_isThatOfTheLastSlice() {
        board.requestDue(10 * MS, 0, 0, 0, 0);
        board.sampled(100 * MS, sample);
        board.requestDue(110 * MS, 1, 0, 0, 0);

        assertThat(board.now().offered()).isEqualTo(1);
    }

    @Test
    void now_shareAndRates_areThoseOfTheLastSecond() {
        // Second 0: ten to fulmar. Second 1: five to fulmar, fifteen to gannet: a quarter.
        long request = 0;
        for (int slice = 0; slice < 20; slice++) {
            long at = slice * 100 * MS;
            for (int i = 0; i < (slice < 10 ? 1 : 2); i++) {
                board.requestDue(at, request, 0, 0, 0);
                board.attemptPicked(at, SEATS, slice < 10 || request % 4 == 0 ? FULMAR : GANNET, request++, 1, 1);
            }
            board.sampled(at + 100 * MS, sample);
        }

        Figures now = board.now();

        assertThat(now.offered()).isEqualTo(30);
        assertThat(now.offeredLastSecond()).isEqualTo(20);
        assertThat(now.backends().get(FULMAR).share()).isEqualTo(0.25);
        assertThat(now.backends().get(GANNET).share()).isEqualTo(0.75);
        assertThat(now.backends().get(3).share()).isZero();
    }

    @Test
    void now_endsCueAndSample_areShown() {
        Cue kill = cue(S, Cue.Kind.KILL, fulmar());
        board.requestDue(0, 0, 0, 0, 0);
        board.requestDue(0, 1, 0, 0, 0);
        board.requestDue(0, 2, 0, 0, 0);
        board.requestEnded(10 * MS, 0, 0, 0, 0, null, 200);
        board.requestEnded(10 * MS, 1, 0, 0, 0, Cause.RESET, 0);
        board.cueApplied(20 * MS, 20 * MS, kill, PlayListener.By.HAND);
        sample.standing[FULMAR] = Standing.DOWN;
        sample.inFlight[FULMAR] = 4;
        board.sampled(100 * MS, sample);
        board.ended(150 * MS, true);

        Figures now = board.now();

        assertThat(now.ended()).isTrue();
        assertThat(now.good()).isEqualTo(1);
        assertThat(now.failedBy()).isEqualTo(Map.of(Cause.RESET, 1L));
        assertThat(now.open()).isEqualTo(1);
        assertThat(now.lastCue()).isEqualTo(new PlayBoard.Played(20 * MS, kill, PlayListener.By.HAND));
        assertThat(now.backends().get(FULMAR).standing()).isEqualTo(Standing.DOWN);
        assertThat(now.backends().get(FULMAR).inFlight()).isEqualTo(4);
    }
}
