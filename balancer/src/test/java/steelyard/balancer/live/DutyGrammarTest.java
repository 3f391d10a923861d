package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;

/** The grammar of heads: RFC 9112, 2.2, 2.3, 4 and 5; RFC 9110, 5.5 and 6.2. */
@ExtendWith(Accounting.class)
class DutyGrammarTest {
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";

    @Test
    @Duty("H045")
    void carriageReturn_bare_is400() throws Exception { // RFC 9112, 2.2
        Duties.of().refuses("GET / HTTP/1.1\r\nHost: a\r\nX: a\rb\r\n\r\n", 400);
        Duties.of().refuses("GET / HTTP/1.1\r\nHost: a\r\nX: a\r\r\n\r\n", 400);
        Duties.of().refuses("GET /\r HTTP/1.1\r\nHost: a\r\n\r\n", 400);
    }

    @Test
    @Duty("H046")
    void value_controlCharacters_is400() throws Exception { // RFC 9110, 5.5
        for (char control : new char[] {0, 1, 0x0b, 0x0c, 0x1b, 0x7f}) {
            Duties.of().refuses("GET / HTTP/1.1\r\nHost: a\r\nX: a" + control + "b\r\n\r\n", 400);
        }
    }

    @Test
    @Duty("H047")
    void lineFeed_alone_is400() throws Exception { // RFC 9112, 2.2: it may end a line, and does not here
        Duties.of().refuses("GET / HTTP/1.1\nHost: a\n\n", 400);
        Duties.of().refuses("GET / HTTP/1.1\r\nHost: a\nX: b\r\n\r\n", 400);
        Duties.of().refuses("GET / HTTP/1.1\r\nHost: a\r\nX: a\r\n\n", 400);
    }

    @Test
    @Duty("H048")
    void emptyLines_beforeARequest_areIgnored() throws Exception { // RFC 9112, 2.2
        Duties.of().ask("\r\n\r\n" + GET, seen -> {
            assertThat(seen.answer().status()).isEqualTo(200);
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H049")
    void whitespace_beforeTheFirstField_is400() throws Exception { // RFC 9112, 2.2
        Duties.of().refuses("GET / HTTP/1.1\r\n X: y\r\nHost: a\r\n\r\n", 400);
        Duties.of().refuses("GET / HTTP/1.1\r\n\tX: y\r\nHost: a\r\n\r\n", 400);
    }

    @Test
    @Duty("H050")
    void octets_thatAreNoHttp_are400() throws Exception { // RFC 9112, 2.2
        Duties.of().refuses("HELO x\r\n\r\n", 400);
        Duties.of().refuses("\u0016\u0003\u0001\u0002\u0000\u0001\u0000\u0001\r\n\r\n", 400);
    }

    @Test
    @Duty("H051")
    void name_followedByWhitespace_is400() throws Exception { // RFC 9112, 5.1
        for (String field : List.of("Content-Length : 5", "Content-Length\t: 5", "X-A : 1", ": 5", "X A: 1")) {
            Duties.of().refuses("POST / HTTP/1.1\r\nHost: a\r\n" + field + "\r\n\r\nhello", 400);
        }
    }

    @Test
    @Duty("H052")
    void name_followedByWhitespaceInAnAnswer_losesIt() throws Exception { // RFC 9112, 5.1
        Duties.of()
                .answering("HTTP/1.1 200 OK\r\nX-A : 1\r\nContent-Length: 2\r\n\r\nok")
                .ask(GET, seen -> assertThat(seen.answer().value("x-a")).isEqualTo("1"));
    }

    @Test
    @Duty("H053")
    void field_folded_is400() throws Exception { // RFC 9112, 5.2
        Duties.of().refuses("GET / HTTP/1.1\r\nHost: a\r\nX: a\r\n b\r\n\r\n", 400);
        Duties.of().refuses("POST / HTTP/1.1\r\nHost: a\r\nTransfer-Encoding:\r\n chunked\r\n\r\n0\r\n\r\n", 400);
    }

    @Test
    @Duty("H054")
    void field_foldedInAnAnswer_becomesOneLine() throws Exception { // RFC 9112, 5.2
        Duties.of()
                .answering("HTTP/1.1 200 OK\r\nX-A: a\r\n b\r\nContent-Length: 2\r\n\r\nok")
                .ask(GET, seen -> assertThat(seen.answer().value("x-a")).matches("a +b"));
    }

    @Test
    @Duty("H055")
    void version_isOurOwnBothWays() throws Exception { // RFC 9112, 2.3; Message takes no other version
        Duties.of()
                .ask(
                        "GET / HTTP/1.0\r\nHost: a\r\n\r\n",
                        seen -> assertThat(seen.request().start()).endsWith(" HTTP/1.1"));
        Duties.of()
                .answering("HTTP/1.0 200 OK\r\nContent-Length: 2\r\n\r\nok")
                .ask(GET, seen -> assertThat(seen.answer().start()).startsWith("HTTP/1.1 200 "));
    }

    @Test
    @Duty("H056")
    void version_inSmallLetters_is400() throws Exception { // RFC 9112, 2.3 with 2.2
        Duties.of().refuses("GET / http/1.1\r\nHost: a\r\n\r\n", 400);
    }

    @Test
    @Duty("H057")
    void version_ofAnotherMajor_is505() throws Exception { // RFC 9110, 6.2 and 15.6.6
        Duties.of().refuses("GET / HTTP/2.0\r\nHost: a\r\n\r\n", 505);
        Duties.of().refuses("GET / HTTP/3.1\r\nHost: a\r\n\r\n", 505);
    }

    @Test
    @Duty("H058")
    void version_ofAHigherMinor_isTakenAsOurs() throws Exception { // RFC 9110, 6.2
        Duties.of().ask("GET / HTTP/1.2\r\nHost: a\r\n\r\n", seen -> {
            assertThat(seen.answer().status()).isEqualTo(200);
            assertThat(seen.request().values("via")).hasSize(1);
            assertThat(seen.harmless()).isTrue();
        });
        String coded = "POST / HTTP/1.2\r\nHost: a\r\nTransfer-Encoding: chunked\r\n\r\n3\r\nabc\r\n0\r\n\r\n";
        Duties.of().refuses(coded, 400); // may be refused, must not be misread
    }

    @Test
    @Duty("H059")
    void status_withoutReason_keepsItsSpace() throws Exception { // RFC 9112, 4
        Duties.of()
                .answering("HTTP/1.1 299 \r\nContent-Length: 2\r\n\r\nok")
                .ask(GET, seen -> assertThat(seen.answer().start()).isEqualTo("HTTP/1.1 299 "));
    }
}
