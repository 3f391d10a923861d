package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;

/** Request lines, Host and limits: RFC 9112, 3; RFC 9110, 5.4, 7.6, 7.7 and 9.3.6; RFC 6585, 5. */
@ExtendWith(Accounting.class)
class DutyRequestLineTest {
    @Test
    @Duty("H030")
    void host_missing_is400() throws Exception { // RFC 9112, 3.2
        Duties.of().refuses("GET / HTTP/1.1\r\n\r\n", 400);
    }

    @Test
    @Duty("H031")
    void host_twice_is400() throws Exception { // RFC 9112, 3.2
        Duties.of().refuses("GET / HTTP/1.1\r\nHost: a\r\nHost: a\r\n\r\n", 400);
        Duties.of().refuses("GET / HTTP/1.1\r\nHost: a\r\nHost: b\r\n\r\n", 400);
    }

    @Test
    @Duty("H032")
    void host_invalid_is400() throws Exception { // RFC 9112, 3.2
        for (String host : List.of("a b", "a/b", "user@a", "a, b", "a?b", "a#b", "\"a\"")) {
            Duties.of().refuses("GET / HTTP/1.1\r\nHost: " + host + "\r\n\r\n", 400);
        }
    }

    @Test
    @Duty({"H033", "H034"})
    void target_absolute_winsOverHost() throws Exception { // RFC 9112, 3.2.2
        Duties.of().ask("GET http://a.example/p?q HTTP/1.1\r\nHost: b.example\r\n\r\n", seen -> {
            assertThat(seen.request().target()).isEqualTo("/p?q");
            assertThat(seen.request().value("host")).isEqualTo("a.example");
            assertThat(seen.answer().status()).isEqualTo(200);
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H035")
    void line_invalid_is400() throws Exception { // RFC 9112, 3.2
        for (String line : List.of(
                "GET /a b HTTP/1.1",
                "GET  / HTTP/1.1",
                "GET\t/ HTTP/1.1",
                " GET / HTTP/1.1",
                "GET / HTTP/1.1 ",
                "GET /\u00e9 HTTP/1.1",
                "GET  HTTP/1.1",
                "GET /",
                "GET ftp://a/ HTTP/1.1",
                "GET * HTTP/1.1")) {
            Duties.of().refuses(line + "\r\nHost: a\r\n\r\n", 400);
        }
    }

    @Test
    @Duty("H036")
    void target_octets_areKept() throws Exception { // RFC 9110, 7.7
        String target = "/a%2Fb//c/../d?x=%41&&y=1;z";
        Duties.of()
                .ask(
                        "GET " + target + " HTTP/1.1\r\nHost: a\r\n\r\n",
                        seen -> assertThat(seen.request().target()).isEqualTo(target));
    }

    @Test
    @Duty("H037")
    void target_ofTheWholeServer_staysAStar() throws Exception { // RFC 9112, 3.2.4
        Duties.of()
                .ask(
                        "OPTIONS * HTTP/1.1\r\nHost: a\r\n\r\n",
                        seen -> assertThat(seen.request().target()).isEqualTo("*"));
    }

    @Test
    @Duty({"H038", "H039"})
    void target_atTheLimit_isForwardedAndBeyondItIs414() throws Exception { // RFC 9112, 3
        String most = "/" + "x".repeat(7_999);
        Duties.of().ask("GET " + most + " HTTP/1.1\r\nHost: a\r\n\r\n", seen -> {
            assertThat(seen.request().target()).isEqualTo(most);
            assertThat(seen.harmless()).isTrue();
        });
        Duties.of().refuses("GET " + most + "x HTTP/1.1\r\nHost: a\r\n\r\n", 414);
        Duties.of().refuses("GET " + most.repeat(3) + " HTTP/1.1\r\nHost: a\r\n\r\n", 414);
        Duties few = Duties.of().with(pool -> pool.limited(20, 1000, Long.MAX_VALUE));
        few.ask(
                "GET /" + "x".repeat(19) + " HTTP/1.1\r\nHost: a\r\n\r\n",
                seen -> assertThat(seen.request().target()).hasSize(20));
        few.refuses("GET /" + "x".repeat(20) + " HTTP/1.1\r\nHost: a\r\n\r\n", 414);
    }

    @Test
    @Duty("H040")
    void method_long_is501() throws Exception { // RFC 9112, 3
        Duties.of().refuses("X".repeat(10_000) + " / HTTP/1.1\r\nHost: a\r\n\r\n", 501);
        Duties.of().refuses("X".repeat(100) + " / HTTP/1.1\r\nHost: a\r\n\r\n", 501);
    }

    @Test
    @Duty({"H041", "H042"})
    void head_tooLarge_is431() throws Exception { // RFC 9110, 5.4; RFC 6585, 5
        Duties.of().refuses("GET / HTTP/1.1\r\nHost: a\r\nX: " + "x".repeat(100_000) + "\r\n\r\n", 431);
        Duties.of().refuses("GET / HTTP/1.1\r\nHost: a\r\n" + "X-A: 0123456789012345\r\n".repeat(2000) + "\r\n", 431);
        String head = "GET / HTTP/1.1\r\nHost: a\r\nX: ";
        Duties few = Duties.of().with(pool -> pool.limited(100, 200, Long.MAX_VALUE));
        String most = head + "x".repeat(200 - head.length() - 4) + "\r\n\r\n";
        few.ask(most, seen -> assertThat(seen.answer().status()).isEqualTo(200));
        few.refuses(most.replace("X: ", "X: x"), 431);
    }

    @Test
    @Duty("H043")
    void method_unknown_isForwardedAndSoAreStatuses() throws Exception { // RFC 9110, 7.6
        for (int status : new int[] {299, 599}) {
            Duties.of()
                    .answering("HTTP/1.1 " + status + " Odd\r\nContent-Length: 2\r\n\r\nok")
                    .ask("DRILL / HTTP/1.1\r\nHost: a\r\n\r\n", seen -> {
                        assertThat(seen.request().method()).isEqualTo("DRILL");
                        assertThat(seen.answer().status()).isEqualTo(status);
                        assertThat(seen.harmless()).isTrue();
                    });
        }
    }

    @Test
    @Duty("H044")
    void connect_isNotServed() throws Exception { // RFC 9110, 9.3.6
        Duties.of().refuses("CONNECT a.example:80 HTTP/1.1\r\nHost: a.example:80\r\n\r\n", 501);
        for (String target : List.of("a.example:", "a.example", "a.example:x", "a.example:65536", ":80")) {
            Duties.of().refuses("CONNECT " + target + " HTTP/1.1\r\nHost: a.example\r\n\r\n", 400);
        }
    }
}
