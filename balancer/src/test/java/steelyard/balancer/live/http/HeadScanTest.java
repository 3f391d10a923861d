package steelyard.balancer.live.http;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.charset.StandardCharsets;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class HeadScanTest {
    private static HeadScan over(String head) {
        HeadScan scan = new HeadScan();
        for (byte octet : head.getBytes(StandardCharsets.ISO_8859_1)) {
            scan.process(octet);
        }
        return scan;
    }

    @Test
    void counts_ofAHead_leaveOutEmptyLinesBeforeIt() {
        HeadScan scan = over("\r\n\r\nPOST /holds HTTP/1.1\r\nHost: a\r\n\r\n");
        assertThat(scan.begun()).isTrue();
        assertThat(scan.faulty()).isFalse();
        assertThat(scan.method()).isEqualTo(4);
        assertThat(scan.target()).isEqualTo(6);
        assertThat(scan.octets()).isEqualTo("POST /holds HTTP/1.1\r\nHost: a\r\n\r\n".length());
        scan.reset();
        assertThat(scan.begun()).isFalse();
    }

    @Test
    void emptyLines_alone_beginNothing() {
        assertThat(over("\r\n\r\n").begun()).isFalse();
        assertThat(over("\r\n\r\n").faulty()).isFalse();
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "GET / HTTP/1.1\n",
                "\nGET / HTTP/1.1\r\n",
                "\rGET / HTTP/1.1\r\n",
                " GET / HTTP/1.1\r\n",
                "GET  HTTP/1.1\r\n",
                "GET / HTTP/1.1 \r\n",
                "GET /\u00e9 HTTP/1.1\r\n",
                "GET / HTTP/1.1\r\n X: a\r\n",
                "GET / HTTP/1.1\r\nX: a\r\n\tb\r\n",
                "GET / HTTP/1.1\r\nX: a\u0000\r\n",
                "GET / HTTP/1.1\r\nX: a\u007f\r\n",
                "GET / HTTP/1.1\r\nX: a\rb\r\n",
                "GET / HTTP/1.1\r\nX: a\nb\r\n",
                "GET / HTTP/1.1\r\n\u00e9: a\r\n",
            })
    void head_readableInTwoWays_isFaulty(String head) {
        assertThat(over(head).faulty()).isTrue();
    }

    @Test
    void value_withTabsAndOctetsAbove127_isFine() {
        assertThat(over("GET / HTTP/1.1\r\nX:\ta \u00e9\t\r\n\r\n").faulty()).isFalse();
    }
}
