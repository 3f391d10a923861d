package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.stage.virtual.Witness.MILLI;

import java.util.List;
import org.junit.jupiter.api.Test;

/** Clients that are held to backends, and keys that lead to them. */
class AffinityTest {
    private static final String POOL =
            "method: round-robin, serves: {workers: 8, time: 1ms}, backends: {fulmar: , gannet: , petrel: }";
    private static final String ONE_CLIENT = "rate: 10/s, clients: 1, give-up: 2s";

    @Test
    void cookie_holdsAClientToItsBackend() {
        assertThat(Witness.of(POOL + ", affinity: cookie", ONE_CLIENT, "2s", "").backendsPicked())
                .containsOnly(0)
                .hasSize(20);
    }

    // Two clients at once would take turns; each keeps what it was given at first.
    @Test
    void cookie_ofEachClient_isItsOwn() {
        Witness told = Witness.of(POOL + ", affinity: cookie", "rate: 100/s, clients: 40, give-up: 2s", "4s", "");
        assertThat(told.backendsPicked()).contains(0, 1, 2);
        assertThat(told.count(null)).isEqualTo(400);
    }

    // Fulmar is drained: its client is bound anew, and stays there when fulmar is back.
    @Test
    void cookie_ofABackendThatMayNotBePicked_bindsAnew() {
        Witness told = Witness.of(
                POOL + ", affinity: cookie", ONE_CLIENT, "3s", "{at: 1s, withdraw: fulmar}, {at: 2s, admit: fulmar}");
        assertThat(told.backendsPicked().subList(0, 10)).containsOnly(0);
        assertThat(told.backendsPicked().subList(10, 30)).containsOnly(1);
    }

    // A request every 500 ms, and cookies that last 300: each is free again.
    @Test
    void cookie_thatIsTooOld_holdsNobody() {
        Witness told = Witness.of(
                POOL + ", affinity: {by: cookie, lasts: 300ms}", "rate: 2/s, clients: 1, give-up: 2s", "3s", "");
        assertThat(told.backendsPicked()).containsExactly(0, 1, 2, 0, 1, 2);
    }

    @Test
    void drain_thatKeepsClients_servesThemUntilItsLimit() {
        Witness told = Witness.of(
                POOL + ", affinity: cookie, drain: {limit: 1s, keep-clients: true}",
                ONE_CLIENT,
                "3s",
                "{at: 1s, drain: fulmar}");
        assertThat(told.picks).allMatch(each -> (each.backend() == 0) == (each.atNanos() < 2_000 * MILLI));
    }

    @Test
    void address_holdsAClientToItsBackend() {
        Witness told = Witness.of(POOL + ", affinity: client", ONE_CLIENT, "2s", "");
        assertThat(told.backendsPicked()).containsOnly(0).hasSize(20);
    }

    @Test
    void hash_byClient_leadsEachAlwaysToTheSame() {
        String pool = POOL.replace("round-robin", "hash, hash: {by: client}");
        assertThat(Witness.of(pool, ONE_CLIENT, "2s", "").backendsPicked().stream()
                        .distinct())
                .hasSize(1);
        assertThat(Witness.of(pool, "rate: 100/s, clients: 40, give-up: 2s", "2s", "")
                        .backendsPicked())
                .contains(0, 1, 2);
    }

    // The number in the path is the client's, so paths lead where clients do not have to.
    @Test
    void hash_byPathHeaderAndCookie_followsTheirText() {
        for (String by : List.of("path", "{header: x-cabin}", "{cookie: cabin}")) {
            String pool = POOL.replace("round-robin", "hash, hash: {by: " + by + "}");
            String same = "rate: 100/s, clients: 40, give-up: 2s, requests: [{get: /holds,"
                    + " headers: {X-Cabin: deck, Cookie: cabin=deck}}]";
            String own = same.replace("/holds", "/holds/{client}").replace("deck", "deck-{client}");
            assertThat(Witness.of(pool, same, "1s", "").backendsPicked().stream()
                            .distinct())
                    .as(by)
                    .hasSize(1);
            assertThat(Witness.of(pool, quoted(own), "2s", "").backendsPicked())
                    .as(by)
                    .contains(0, 1, 2);
        }
    }

    private static String quoted(String traffic) {
        return traffic.replace("/holds/{client}", "'/holds/{client}'")
                .replace("deck-{client},", "'deck-{client}',")
                .replace("cabin=deck-{client}}", "'cabin=deck-{client}'}");
    }

    @Test
    void failures_benchABackend_forItsTime() {
        Witness told = Witness.of(
                POOL + ", bench: {after: 3, time: 500ms}",
                "rate: 30/s, give-up: 2s",
                "2s",
                "{at: 0s, fail: fulmar, status: 500}");
        // Fulmar is every third: its third failure is request 6, due at 217 ms.
        long thirdFailure = told.overs.stream()
                .filter(each -> each.backend() == 0)
                .toList()
                .get(2)
                .atNanos();
        assertThat(told.transitions.get(0).atNanos()).isEqualTo(thirdFailure);
        assertThat(told.transitions.get(1).atNanos()).isEqualTo(thirdFailure + 500 * MILLI);
        assertThat(told.picks)
                .filteredOn(each -> each.atNanos() > thirdFailure && each.atNanos() < thirdFailure + 500 * MILLI)
                .isNotEmpty()
                .noneMatch(each -> each.backend() == 0);
    }
}
