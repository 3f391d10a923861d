package steelyard.harness.stage.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.ConcurrentLinkedQueue;
import org.junit.jupiter.api.Test;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Change;
import steelyard.balancer.live.control.CueTaker;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.Hands;

class CuesByHandTest {
    private static final long SECOND = 1_000_000_000L;
    private static final Drill DRILL = DrillReader.read("test", """
                    drill: By hand
                    about: Cues that are sent.
                    stage:
                      pools:
                        seats:
                          method: round-robin
                          serves: {workers: 2, queue: 4, time: {fixed: 1ms}}
                          backends: {fulmar: {}, gannet: {}}
                    traffic:
                      - {to: seats, arrivals: even, rate: 1/s}
                    lasts: 10s
                    cues:
                      - {at: 5s, kill: gannet}
                    """).value().orElseThrow();

    private final Conductor conductor = new Conductor(DRILL, new Chance(7), new ConcurrentLinkedQueue<>());
    private final CuesByHand cues = new CuesByHand(DRILL, conductor);
    private final List<String> applied = new ArrayList<>();

    private final Hands hands = new Hands() {
        @Override
        public void send(long request, long dueNanos, int traffic, int kind, int client) {}

        @Override
        public void change(int backend, Change change) {}

        @Override
        public void drain(int backend, long limitNanos) {}

        @Override
        public void admit(int backend) {}

        @Override
        public void withdraw(int backend) {}

        @Override
        public void reweigh(int backend, int weight) {}

        @Override
        public void reweighHost(int host, int weight) {}

        @Override
        public void retune(int pool, ProbeSettings probe) {}

        @Override
        public void retune(int pool, DrainSettings drain) {}

        @Override
        public void retune(int pool, PoolSettings.Method method) {}

        @Override
        public void apply(long dueNanos, Cue cue, PlayListener.By by, Runnable carryOut) {
            carryOut.run();
            applied.add(by + " " + cue.name() + " at " + dueNanos / 1_000_000);
        }
    };

    @Test
    void take_cuesAsJson_areCarriedOutAtTheNextPoll() {
        assertThat(cues.take("{\"drain\": \"fulmar\", \"limit\": \"2s\"}"))
                .isEqualTo(CueTaker.Reply.taken("drain fulmar"));
        assertThat(cues.take("{\"slow\": [\"fulmar\", \"gannet\"], \"factor\": 3, \"for\": \"1s\"}")
                        .kind())
                .isEqualTo(CueTaker.Kind.TAKEN);
        conductor.poll(SECOND, hands, 100);
        assertThat(applied).hasSize(2).allMatch(each -> each.startsWith("HAND ") && each.endsWith(" at 1000"));
    }

    @Test
    void take_aCueThatChangesNothing_saysSo() {
        assertThat(cues.take("revive: gannet").line()).isEqualTo("nothing changes: gannet was not killed");
        conductor.poll(SECOND, hands, 100);
        assertThat(cues.take("admit: [fulmar, gannet]"))
                .isEqualTo(CueTaker.Reply.taken("nothing changes: fulmar, gannet are not out"));
        conductor.poll(2 * SECOND, hands, 100);
        assertThat(cues.take("withdraw: fulmar").line()).isEqualTo("withdraw fulmar");
        // Not yet carried out, so what would change is not known.
        assertThat(cues.take("admit: fulmar").line()).isEqualTo("admit fulmar");
        conductor.poll(3 * SECOND, hands, 100);
        assertThat(cues.take("admit: fulmar").line()).isEqualTo("nothing changes: fulmar is not out");
        conductor.poll(6 * SECOND, hands, 100); // the drill kills gannet at 5 s
        assertThat(cues.take("revive: {pool: seats}").line()).isEqualTo("revive pool seats");
    }

    @Test
    void take_aReviveAfterTheEndOfAKill_changesNothing() {
        assertThat(cues.take("{kill: fulmar, for: 1s}").line()).isEqualTo("kill fulmar");
        conductor.poll(SECOND, hands, 100);
        conductor.poll(2 * SECOND, hands, 100);
        assertThat(cues.take("revive: fulmar").line()).isEqualTo("nothing changes: fulmar was not killed");
    }

    @Test
    void take_theSameCueTwice_hasANameEachTime() {
        assertThat(cues.take("admit: fulmar").kind()).isEqualTo(CueTaker.Kind.TAKEN);
        assertThat(cues.take("admit: fulmar").kind()).isEqualTo(CueTaker.Kind.TAKEN);
        conductor.poll(SECOND, hands, 100);
        assertThat(applied).hasSize(2).doesNotHaveDuplicates();
    }

    @Test
    void take_whatIsNoCue_saysWhyInOneLine() {
        for (String text : List.of(
                "",
                "{",
                "{\"kill\": \"fulmer\"}",
                "{\"sink\": \"fulmar\"}",
                "[1]",
                "{\"kill\": \"fulmar\", \"at\": \"3s\"}")) {
            CueTaker.Reply reply = cues.take(text);
            assertThat(reply.kind()).as(text).isEqualTo(CueTaker.Kind.REFUSED);
            assertThat(reply.line()).startsWith("cue").contains("; ").doesNotContain("\n");
        }
        conductor.poll(SECOND, hands, 100);
        assertThat(applied).isEmpty();
    }

    @Test
    void take_afterThePlay_saysThatNothingPlays() {
        conductor.poll(10 * SECOND, hands, 100);
        assertThat(cues.take("kill: fulmar").kind()).isEqualTo(CueTaker.Kind.NOTHING_PLAYS);
    }
}
