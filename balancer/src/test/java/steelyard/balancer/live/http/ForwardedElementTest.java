package steelyard.balancer.live.http;

import static org.assertj.core.api.Assertions.assertThat;

import java.net.InetAddress;
import java.net.InetSocketAddress;
import org.junit.jupiter.api.Test;
import steelyard.balancer.live.Duty;

class ForwardedElementTest {
    private static InetSocketAddress at(int... octets) throws Exception {
        byte[] bytes = new byte[octets.length];
        for (int i = 0; i < octets.length; i++) {
            bytes[i] = (byte) octets[i];
        }
        return new InetSocketAddress(InetAddress.getByAddress(bytes), 4711);
    }

    @Test
    @Duty("H025")
    void node_ofIpv6OrWithPort_isQuoted() throws Exception { // RFC 7239, 4 and 6
        InetSocketAddress six = at(0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 1);
        assertThat(ForwardedElement.node(six, false)).isEqualTo("\"[0:0:0:0:0:0:0:1]\"");
        assertThat(ForwardedElement.node(six, true)).isEqualTo("\"[0:0:0:0:0:0:0:1]:4711\"");
        InetSocketAddress four = at(192, 0, 2, 43);
        assertThat(ForwardedElement.node(four, false)).isEqualTo("192.0.2.43");
        assertThat(ForwardedElement.node(four, true)).isEqualTo("\"192.0.2.43:4711\"");
        assertThat(ForwardedElement.node(null, false)).isEqualTo("unknown");
    }
}
