package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;

/** Where a request's content ends: RFC 9112, 6 and 7; RFC 9110, 8.6. */
@ExtendWith(Accounting.class)
class DutyFramingTest {
    private static String post(String fields, String content) {
        return "POST /holds HTTP/1.1\r\nHost: a\r\n" + fields + "\r\n\r\n" + content;
    }

    private static String chunked(String content) {
        return post("Transfer-Encoding: chunked", content);
    }

    @Test
    @Duty({"H060", "H061"})
    void length_besideATransferCoding_is400AndCloses() throws Exception { // RFC 9112, 6.1 and 6.3 item 3
        Duties.of().refuses(post("Content-Length: 4\r\nTransfer-Encoding: chunked", "0\r\n\r\n"), 400);
        Duties.of().refuses(post("Transfer-Encoding: chunked\r\nContent-Length: 4", "0\r\n\r\n"), 400);
    }

    @Test
    @Duty({"H062", "H063"})
    void coding_otherThanChunked_is400AndCloses() throws Exception { // RFC 9112, 6.1 and 6.3 item 4
        for (String coding : List.of(
                "chunked, gzip",
                "chunked, identity",
                "gzip, chunked",
                "identity",
                "xchunked",
                "\u000bchunked",
                "chunked\u000b",
                "chunked, chunked",
                "\"chunked\"",
                "chunked;a=b",
                "chunked,",
                "",
                "chunked\r\nTransfer-Encoding: chunked",
                "chunked\r\nTransfer-Encoding: identity")) {
            Duties.of().refuses(post("Transfer-Encoding: " + coding, "0\r\n\r\n"), 400, 501);
        }
    }

    @Test
    @Duty("H064")
    void coding_ofAnOldRequest_is400AndCloses() throws Exception { // RFC 9112, 6.1
        Duties.of().refuses("POST / HTTP/1.0\r\nHost: a\r\nTransfer-Encoding: chunked\r\n\r\n0\r\n\r\n", 400);
    }

    @Test
    @Duty({"H065", "H067", "H068"})
    void length_invalid_is400AndCloses() throws Exception { // RFC 9112, 6.3 item 5; RFC 9110, 8.6
        for (String length : List.of(
                "+5",
                "-1",
                "0x5",
                "5 5",
                "5a",
                "",
                "5,6",
                "5;a",
                "5.0",
                "18446744073709551621", // 2^64 + 5
                "5\r\nContent-Length: 6",
                "5\r\nContent-length: 6")) {
            Duties.of().refuses(post("Content-Length: " + length, "hello"), 400, 413);
        }
    }

    @Test
    @Duty("H066")
    void length_twiceTheSame_is400() throws Exception { // RFC 9110, 8.6: it may be reduced, and is not here
        String content = "x".repeat(42);
        Duties.of().refuses(post("Content-Length: 42\r\nContent-Length: 42", content), 400);
        Duties.of().refuses(post("Content-Length: 42, 42", content), 400);
    }

    @Test
    @Duty({"H069", "H070"})
    void chunk_inexact_is400AndCloses() throws Exception { // RFC 9112, 7.1
        for (String content : List.of(
                "10000000000000005\r\nhello\r\n0\r\n\r\n", // 2^64 + 5
                "100000005\r\nhello\r\n0\r\n\r\n", // 2^32 + 5
                "g\r\nhello\r\n0\r\n\r\n",
                "0x5\r\nhello\r\n0\r\n\r\n",
                "-1\r\nhello\r\n0\r\n\r\n",
                "+5\r\nhello\r\n0\r\n\r\n",
                " 5\r\nhello\r\n0\r\n\r\n",
                "5 \r\nhello\r\n0\r\n\r\n",
                "\r\nhello\r\n0\r\n\r\n",
                "5\nhello\r\n0\r\n\r\n",
                "5;a\nhello\r\n0\r\n\r\n",
                "5\r\nhello0\r\n\r\n",
                "5\r\nhelloxx\r\n0\r\n\r\n",
                "5\r\nhello\n0\r\n\r\n",
                "5\r\nhello\r0\r\n\r\n")) {
            Duties.of().aborting().refuses(chunked(content), 400);
        }
    }

    @Test
    @Duty("H071")
    void chunk_extensions_areIgnored() throws Exception { // RFC 9112, 7.1.1
        Duties.of().ask(chunked("5;a=b;c=\"d\"\r\nhello\r\n2 ;e\r\nok\r\n0;f\r\n\r\n"), seen -> {
            assertThat(seen.request().content()).isEqualTo("hellook");
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H072")
    void chunk_extensionsWithoutEnd_are400() throws Exception { // RFC 9112, 7.1.1
        Duties.of().aborting().refuses(chunked("5;a=" + "x".repeat(1_000_000) + "\r\nhello\r\n0\r\n\r\n"), 400);
        String one = "1;a=" + "x".repeat(1000) + "\r\nx\r\n";
        Duties.of().aborting().refuses(chunked(one.repeat(1000) + "0\r\n\r\n"), 400);
    }

    @Test
    void chunks_ofOneOctetEach_areTaken() throws Exception {
        Duties.of().ask(chunked("1\r\nx\r\n".repeat(20_000) + "0\r\n\r\n"), seen -> {
            assertThat(seen.request().content()).hasSize(20_000);
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H073")
    void trailer_ofFramingOrRouting_isNoHeader() throws Exception { // RFC 9112, 7.1.2
        String trailers = "Content-Length: 0\r\nHost: evil\r\nTransfer-Encoding: x\r\n\r\n";
        Duties.of().ask(chunked("5\r\nhello\r\n0\r\n" + trailers), seen -> {
            assertThat(seen.request().value("host")).isEqualTo("a");
            assertThat(seen.request().has("content-length")).isFalse();
            assertThat(seen.request().value("transfer-encoding")).isEqualToIgnoringCase("chunked");
            assertThat(seen.request().trailers()).isEmpty();
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    void trailer_folded_is400() throws Exception { // RFC 9112, 5.2
        Duties.of().aborting().refuses(chunked("5\r\nhello\r\n0\r\nX-T: a\r\n b\r\n\r\n"), 400);
        Duties.of().aborting().refuses(chunked("5\r\nhello\r\n00;x\r\nX-T: a\nX-U: b\r\n\r\n"), 400);
    }

    @Test
    @Duty("H080")
    void content_ofAGet_isContent() throws Exception { // RFC 9112, 6
        String inside = "GET /x HTTP/1.1\r\nHost: b\r\n\r\n";
        Duties.of()
                .ask("GET / HTTP/1.1\r\nHost: a\r\nContent-Length: " + inside.length() + "\r\n\r\n" + inside, seen -> {
                    assertThat(seen.request().target()).isEqualTo("/");
                    assertThat(seen.request().content()).isEqualTo(inside);
                    assertThat(seen.harmless()).isTrue();
                });
    }

    @Test
    @Duty("H120")
    void content_overTheLimit_is413() throws Exception { // RFC 9110, 15.5.14
        Duties few = Duties.of().aborting().with(pool -> pool.limited(8000, 32_768, 10));
        few.ask(post("Content-Length: 10", "0123456789"), seen -> {
            assertThat(seen.request().content()).isEqualTo("0123456789");
            assertThat(seen.harmless()).isTrue();
        });
        few.refuses(post("Content-Length: 11", "01234567890"), 413); // declared
        few.refuses(chunked("6\r\nabcdef\r\n5\r\nghijk\r\n0\r\n\r\n"), 413); // counted
        few.ask(
                chunked("6\r\nabcdef\r\n4\r\nghij\r\n0\r\n\r\n"),
                seen -> assertThat(seen.request().content()).isEqualTo("abcdefghij"));
    }
}
