package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.util.function.UnaryOperator;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.balancer.settings.AffinitySettings;
import steelyard.balancer.settings.HashSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;

/** Clients that are held to a backend, by cookie or address, and keys that are. */
@ExtendWith(Accounting.class)
class AffinityTest {
    private static final long HALF_AN_HOUR = 1800 * LivePlay.SECOND;

    private static FakeBackend named(String name) throws IOException {
        return FakeBackend.answering("HTTP/1.1 200 OK\r\nContent-Length: 1\r\n\r\n" + name);
    }

    private static UnaryOperator<Pool> held(AffinitySettings.By by) {
        AffinitySettings settings = new AffinitySettings(by, "steelyard-berth", HALF_AN_HOUR);
        return pool -> pool.with(builder -> builder.affinity(settings));
    }

    private static String request(String more) {
        return "GET / HTTP/1.1\r\nHost: quay\r\n" + more + "\r\n";
    }

    private static String cookieOf(String answer) {
        return answer.lines()
                .filter(line -> line.startsWith("set-cookie: "))
                .map(line -> line.substring("set-cookie: ".length()))
                .findFirst()
                .orElse("");
    }

    private static String pairOf(String answer) {
        String cookie = cookieOf(answer);
        return cookie.substring(0, cookie.indexOf(';'));
    }

    @Test
    void cookie_ofAFirstAnswer_holdsTheClientToItsBackend() throws Exception {
        try (FakeBackend one = named("1");
                FakeBackend two = named("2");
                LivePlay play = LivePlay.of(held(AffinitySettings.By.COOKIE), one.address(), two.address())) {
            String first = play.ask(request(""));
            assertThat(first).endsWith("1");
            assertThat(cookieOf(first))
                    .startsWith("steelyard-berth=0.")
                    .endsWith("; Path=/; Max-Age=1800; HttpOnly; SameSite=Lax");
            String pair = pairOf(first);
            for (int i = 0; i < 3; i++) {
                String next = play.ask(request("Cookie: tide=high; " + pair + "\r\n"));
                assertThat(next).endsWith("1");
                // Given anew each time: half an hour counts from the last visit.
                assertThat(cookieOf(next)).isEqualTo(cookieOf(first));
            }
            // The held ones took no turn: the next without a cookie goes to the second.
            assertThat(play.ask(request(""))).endsWith("2");
        }
    }

    @Test
    void cookie_thatWasMadeUp_isIgnored() throws Exception {
        try (FakeBackend one = named("1");
                FakeBackend two = named("2");
                LivePlay play = LivePlay.of(held(AffinitySettings.By.COOKIE), one.address(), two.address())) {
            String genuine = pairOf(play.ask(request("")));
            char last = genuine.charAt(genuine.length() - 1);
            String forged = genuine.substring(0, genuine.length() - 1) + (last == 'A' ? 'B' : 'A');
            assertThat(play.ask(request("Cookie: " + forged + "\r\n")))
                    .endsWith("2")
                    .contains("set-cookie");
            String moved = genuine.replace("=0.", "=1.");
            assertThat(play.ask(request("Cookie: " + moved + "\r\n")))
                    .endsWith("1")
                    .contains("set-cookie");
            assertThat(play.ask(request("Cookie: steelyard-berth=7.x\r\n"))).endsWith("2");
            assertThat(play.ask(request("Cookie: steelyard-berth=-1.x\r\n"))).endsWith("1");
            assertThat(play.ask(request("Cookie: steelyard-berth=\r\n"))).endsWith("2");
        }
    }

    @Test
    void cookie_ofABackendThatDrains_isReplaced() throws Exception {
        try (FakeBackend one = named("1");
                FakeBackend two = named("2");
                LivePlay play = LivePlay.of(held(AffinitySettings.By.COOKIE), one.address(), two.address())) {
            String pair = pairOf(play.ask(request("")));
            play.balancer.drain(0, 0);
            String moved = play.ask(request("Cookie: " + pair + "\r\n"));
            assertThat(moved).endsWith("2");
            assertThat(pairOf(moved)).startsWith("steelyard-berth=1.");
        }
    }

    @Test
    void address_ofAClient_holdsItToItsBackend() throws Exception {
        try (FakeBackend one = named("1");
                FakeBackend two = named("2");
                LivePlay play = LivePlay.of(held(AffinitySettings.By.CLIENT), one.address(), two.address())) {
            String first = play.ask(request(""));
            for (int i = 0; i < 4; i++) {
                assertThat(play.ask(request(""))).endsWith(first.substring(first.length() - 1));
            }
            assertThat(first).doesNotContain("set-cookie");
        }
    }

    private static UnaryOperator<Pool> hashing(HashSettings.By by, String name) {
        HashSettings hash = new HashSettings(by, name, HashSettings.Table.RENDEZVOUS, 100, 65_537, 0);
        return pool -> pool.with(builder ->
                builder.pick(PickSettings.of(PoolSettings.Method.HASH).with(hash)));
    }

    private static char servedBy(LivePlay play, String target, String more) throws IOException {
        String answer = play.ask("GET " + target + " HTTP/1.1\r\nHost: quay\r\n" + more + "\r\n");
        return answer.charAt(answer.length() - 1);
    }

    /** Of 32 keys not all may meet the same backend (that is 1 in 2 to the 31), and each always meets its own. */
    private void eachKeyHasItsBackend(
            UnaryOperator<Pool> with, UnaryOperator<String> target, UnaryOperator<String> more) throws Exception {
        try (FakeBackend one = named("1");
                FakeBackend two = named("2");
                LivePlay play = LivePlay.of(with, one.address(), two.address())) {
            StringBuilder once = new StringBuilder();
            StringBuilder again = new StringBuilder();
            for (int key = 0; key < 32; key++) {
                String text = "k" + key;
                once.append(servedBy(play, target.apply(text), more.apply(text)));
                again.append(servedBy(play, target.apply(text), more.apply(text)));
            }
            assertThat(once).contains("1").contains("2");
            assertThat(again.toString()).isEqualTo(once.toString());
        }
    }

    @Test
    void hash_ofPath_goesByTheTarget() throws Exception {
        eachKeyHasItsBackend(hashing(HashSettings.By.PATH, ""), key -> "/sailings?day=" + key, key -> "");
    }

    @Test
    void hash_ofHeader_goesByItsValue() throws Exception {
        eachKeyHasItsBackend(
                hashing(HashSettings.By.HEADER, "Ferry-Card"), key -> "/", key -> "ferry-card: " + key + "\r\n");
    }

    @Test
    void hash_ofCookie_goesByItsValue() throws Exception {
        eachKeyHasItsBackend(
                hashing(HashSettings.By.COOKIE, "card"), key -> "/", key -> "Cookie: a=b; card=" + key + "; c=d\r\n");
    }
}
