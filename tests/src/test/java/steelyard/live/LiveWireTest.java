package steelyard.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.HashMap;
import java.util.Map;
import java.util.concurrent.ConcurrentLinkedQueue;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.accounting.Accounting;
import steelyard.backends.behave.Chance;
import steelyard.balancer.core.decide.Outcome;
import steelyard.contract.Heard;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.live.LiveStage;

/** What only a wire has: TLS, tunnels, clients with addresses and cookies of their own. */
@ExtendWith(Accounting.class)
class LiveWireTest {
    private static final long SEED = 7;

    private static Drill drill(String pool, String request) {
        return DrillReader.read("wire.yaml", """
                        drill: On the wire
                        about: Ferries ask for sailings.
                        stage:
                          pools:
                            seats:
                              serves: {workers: 64, time: {fixed: 1ms}}
                              timeouts: {connect: 10s, first-byte: 15s}
                              backends: {fulmar: {}, gannet: {}, petrel: {}}
                        %s
                        traffic:
                          - {to: seats, arrivals: even, rate: 40/s, clients: 8, give-up: 20s, requests: [%s]}
                        lasts: 2s
                        """.formatted(pool.indent(6).stripTrailing(), request))
                .value()
                .orElseThrow();
    }

    private static Heard play(Drill drill) throws CannotPlay {
        Heard heard = new Heard();
        try (LiveStage stage = new LiveStage(drill, SEED)) {
            stage.open(heard);
            assertThat(stage.clientsHaveAddresses()).isTrue();
            stage.play(new Conductor(drill, new Chance(SEED), new ConcurrentLinkedQueue<>()));
        }
        assertThat(heard.dues).hasSize(80);
        assertThat(heard.ends).hasSize(80);
        assertThat(heard.inFlight()).isZero();
        assertThat(heard.ends.stream().filter(each -> each.cause() != null)).isEmpty();
        return heard;
    }

    /** The backends that each of eight clients met; requests of a client are told by its number in the due order. */
    private static Map<Integer, Map<Integer, Integer>> met(Heard heard) {
        return met(heard, 0);
    }

    /** The same from a request on. */
    private static Map<Integer, Map<Integer, Integer>> met(Heard heard, long from) {
        Map<Integer, Map<Integer, Integer>> met = new HashMap<>();
        for (Heard.Pick pick : heard.picks) {
            if (pick.request() >= from) {
                met.computeIfAbsent(heard.clientOf(pick.request()), client -> new HashMap<>())
                        .merge(pick.backend(), 1, Integer::sum);
            }
        }
        return met;
    }

    @Test
    void tlsOnBothSides_serves() throws CannotPlay {
        Heard heard = play(drill(
                "method: round-robin\nfront: {tls: true}\nbackend-tls: true\n"
                        + "probe: {path: /afloat, every: 200ms, within: 10s, misses: 1, passes: 1}",
                "{get: /sailings}"));
        assertThat(heard.transitions).isEmpty();
    }

    @Test
    void octetsOverTls_serve() throws CannotPlay {
        Heard heard = play(drill(
                "method: round-robin\ncount: connections\nfront: {kind: tcp, tls: true}\nbackend-tls: true",
                "{get: /sailings}"));
        assertThat(heard.picks).isNotEmpty().allMatch(each -> each.request() < 0);
    }

    @Test
    void upgrade_staysInFlightAsLongAsItIsOpen() throws CannotPlay {
        assertTunnelsStayOpen("method: round-robin");
    }

    @Test
    void upgrade_overTlsOnBothSides_staysInFlightAsLongAsItIsOpen() throws CannotPlay {
        assertTunnelsStayOpen("method: round-robin\nfront: {tls: true}\nbackend-tls: true");
    }

    private static void assertTunnelsStayOpen(String pool) throws CannotPlay {
        Heard heard = play(drill(pool, "{get: /berths, upgrade: websocket, open: 500ms}"));
        assertThat(heard.ends).allMatch(each -> each.status() == 101);
        assertThat(heard.overs).hasSize(80).allMatch(each -> each.outcome() == Outcome.ANSWERED);
        Map<Long, Long> picked = new HashMap<>();
        heard.picks.forEach(each -> picked.put(each.request(), each.atNanos()));
        assertThat(heard.overs).allMatch(each -> each.atNanos() - picked.get(each.request()) >= 500_000_000L);
    }

    @Test
    void cookie_holdsEachClientToItsBackend() throws CannotPlay {
        Heard heard = play(drill("method: round-robin\naffinity: cookie", "{get: /sailings}"));
        // A client may have several requests under way before its first answer, and then keeps the latest cookie.
        assertThat(met(heard, 40))
                .hasSize(8)
                .allSatisfy((client, backends) -> assertThat(backends).hasSize(1));
    }

    @Test
    void hashOfAddresses_givesEachClientOneBackend() throws CannotPlay {
        Heard heard = play(drill("method: hash\nhash: {by: client}", "{get: /sailings}"));
        assertThat(met(heard))
                .hasSize(8)
                .allSatisfy((client, backends) -> assertThat(backends).hasSize(1));
        assertThat(heard.picks).extracting(Heard.Pick::backend).doesNotContain(-1);
        assertThat(heard.picks.stream().map(Heard.Pick::backend).distinct().count())
                .isGreaterThan(1);
    }

    @Test
    void hashOfPaths_withTheClientsNumber_givesEachClientOneBackend() throws CannotPlay {
        Heard heard = play(drill("method: hash\nhash: {by: path}", "{get: \"/holds/{client}\"}"));
        assertThat(met(heard))
                .hasSize(8)
                .allSatisfy((client, backends) -> assertThat(backends).hasSize(1));
    }
}
