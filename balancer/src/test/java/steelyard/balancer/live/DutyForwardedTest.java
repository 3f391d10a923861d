package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;

/** The Forwarded field: RFC 7239. */
@ExtendWith(Accounting.class)
class DutyForwardedTest {
    private static final String GET = "GET / HTTP/1.1\r\nHost: a.example:81\r\n\r\n";

    private static List<String> parameters(String element) {
        return Arrays.asList(element.split(";"));
    }

    private static String last(Duties.Seen seen) {
        List<String> lines = seen.request().values("forwarded");
        return lines.get(lines.size() - 1);
    }

    @Test
    @Duty("H021")
    void forwarded_notAskedFor_isNotAdded() throws Exception { // RFC 7239, 4
        Duties.of().ask(GET, seen -> assertThat(seen.request().has("forwarded")).isFalse());
    }

    @Test
    @Duty({"H022", "H026"})
    void forwarded_element_namesEachParameterOnce() throws Exception { // RFC 7239, 4, 5.3, 5.4
        Duties.of().with(Pool::forwarding).ask(GET, seen -> {
            List<String> names = parameters(last(seen)).stream()
                    .map(parameter ->
                            parameter.substring(0, parameter.indexOf('=')).toLowerCase(Locale.ROOT))
                    .toList();
            assertThat(names).containsExactly("for", "by", "host", "proto");
            assertThat(parameters(last(seen))).contains("for=127.0.0.1", "host=\"a.example:81\"", "proto=http");
            assertThat(last(seen)).containsPattern(";by=\"127\\.0\\.0\\.1:[0-9]+\";");
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty({"H023", "H024", "H029"})
    void forwarded_ofOthers_isKeptInFrontAndNotBelieved() throws Exception { // RFC 7239, 4 and 8.1
        String request =
                "GET / HTTP/1.1\r\nHost: a\r\nForwarded: for=192.0.2.43\r\nForwarded: for=\"[2001:db8::1]\"\r\n\r\n";
        Duties.of().with(Pool::forwarding).ask(request, seen -> {
            List<String> lines = seen.request().values("forwarded");
            assertThat(lines).hasSize(3).startsWith("for=192.0.2.43", "for=\"[2001:db8::1]\"");
            assertThat(lines.get(2)).startsWith("for=127.0.0.1;"); // the socket's address, whatever was claimed
        });
    }

    @Test
    @Duty("H027")
    void forwarded_hidden_makesUpIdentifiers() throws Exception { // RFC 7239, 6.3
        Duties.of().with(Pool::forwardingHidden).ask(GET, seen -> {
            assertThat(last(seen))
                    .matches("for=_[A-Za-z0-9._-]+;by=_[A-Za-z0-9._-]+;host=\"a\\.example:81\";proto=http")
                    .doesNotContain("127");
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    void forwarded_hidden_isTheSameForOneAddressAndNotForAnotherBalancer() throws Exception {
        List<String> first = names();
        assertThat(first.get(0)).isEqualTo(first.get(1));
        assertThat(names().get(0)).isNotEqualTo(first.get(0));
    }

    private static List<String> names() throws Exception {
        try (KeepingBackend backend = new KeepingBackend(request -> Duties.OK);
                LivePlay play = LivePlay.of(Pool::forwardingHidden, backend.address())) {
            play.ask(GET);
            play.ask(GET);
            return backend.requests().stream()
                    .map(request -> parameters(request.value("forwarded")).get(0))
                    .toList();
        }
    }

    @Test
    @Duty("H028")
    void forwarded_inAnAnswer_isDropped() throws Exception { // RFC 7239, 4 and 8.2
        Duties.of()
                .with(Pool::forwarding)
                .answering("HTTP/1.1 200 OK\r\nForwarded: for=x\r\nContent-Length: 0\r\n\r\n")
                .ask(GET, seen -> assertThat(seen.answer().has("forwarded")).isFalse());
    }
}
